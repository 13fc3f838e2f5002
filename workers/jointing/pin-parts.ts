import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { signedVolume } from '../../shared/geometry/mesh/measure.js';
import { type PlanPart } from '../../shared/jobs/joint-plan.js';
import { type Solids } from '../solids/solid-kernel.js';
import { lipMesh } from './backing-lip.js';
import { type SeamJoint } from './plan-joints.js';
import { pinMeasures, type SeamPin } from './seam-pin.js';

/** A part with its mesh as it is printed; null for what is cut from stock. */
export interface MadePart {
  readonly part: PlanPart;
  readonly mesh: TriangleMesh | null;
}

/** Sides of a printed pin's round. */
const SIDES = 32;

/** The name of the part that a pin is, null when it belongs to a piece. */
export function partOf(joint: SeamJoint, pin: SeamPin): string | null {
  if (joint.kind === 'fixed-pin') return null;
  const kind = joint.kind === 'stock-rod' ? 'rod' : 'pin';
  return `${kind}-${shown(pin.diameterMm)}x${shown(pin.depthsMm[0] + pin.depthsMm[1])}`;
}

/** Names of the lips of a plan, for each joint those of its lips. */
export function lipNames(joints: readonly SeamJoint[]): string[][] {
  let next = 0;
  return joints.map(({ lips }) => lips.map(() => `lip-${String(++next).padStart(2, '0')}`));
}

/** All parts beside the pieces: pins and rods, equal ones counted together, and lips. */
export function partsOf(solids: Solids, joints: readonly SeamJoint[]): MadePart[] {
  const names = lipNames(joints);
  const lips = joints.flatMap((joint, k) =>
    joint.lips.map((lip, n): MadePart => {
      const mesh = lipMesh(solids, lip);
      return {
        part: {
          name: names[k][n],
          kind: 'lip',
          count: 1,
          diameterMm: lip.thicknessMm,
          lengthMm: lip.lengthMm,
          volumeMm3: signedVolume(mesh),
          file: `lips/${names[k][n]}.stl`,
        },
        mesh,
      };
    }),
  );
  return [...pinParts(joints), ...lips];
}

/** All pins and rods of a plan, equal ones counted together, by name. */
export function pinParts(joints: readonly SeamJoint[]): MadePart[] {
  const found = new Map<string, { joint: SeamJoint; pin: SeamPin; count: number }>();
  for (const joint of joints)
    for (const pin of joint.pins) {
      const name = partOf(joint, pin);
      if (name === null) continue;
      const known = found.get(name);
      if (known) known.count++;
      else found.set(name, { joint, pin, count: 1 });
    }
  return [...found.entries()]
    .sort(([a], [b]) => a.localeCompare(b, 'en', { numeric: true }))
    .map(([name, { joint, pin, count }]) => {
      const isRod = joint.kind === 'stock-rod';
      const lengthMm = pin.depthsMm[0] + pin.depthsMm[1];
      const mesh = isRod ? null : lyingPin(pin.diameterMm, lengthMm);
      const part: PlanPart = {
        name,
        kind: isRod ? 'rod' : 'pin',
        count,
        diameterMm: pin.diameterMm,
        lengthMm,
        volumeMm3: mesh ? signedVolume(mesh) : (Math.PI / 4) * pin.diameterMm ** 2 * lengthMm,
        file: mesh ? `pins/${name}.stl` : null,
      };
      return { part, mesh };
    });
}

/**
 * A pin lying along x on z = 0 to be printed without support and strong along its length: round
 * above, with a flat below where its side would lean more than 45°, its ends chamfered.
 */
export function lyingPin(diameterMm: number, lengthMm: number): TriangleMesh {
  const { leadInMm } = pinMeasures(diameterMm, { lineWidthMm: 0.4, edgeBevelMm: 0 });
  const radius = diameterMm / 2;
  const flat = radius * Math.SQRT1_2;
  const ring = profile(radius);
  const stations = [
    { x: 0, scale: (radius - leadInMm) / radius },
    { x: leadInMm, scale: 1 },
    { x: lengthMm - leadInMm, scale: 1 },
    { x: lengthMm, scale: (radius - leadInMm) / radius },
  ];
  const n = ring.length;
  const positions = stations.flatMap(({ x, scale }) =>
    ring.flatMap(([y, z]) => [x, radius + scale * y, flat + scale * z]),
  );
  const indices: number[] = [];
  for (let k = 0; k + 1 < stations.length; k++)
    for (let i = 0; i < n; i++) {
      const [a, b] = [k * n + i, k * n + ((i + 1) % n)];
      indices.push(a, b, b + n, a, b + n, a + n);
    }
  const end = (stations.length - 1) * n;
  for (let i = 1; i + 1 < n; i++) {
    indices.push(0, i + 1, i);
    indices.push(end, end + i, end + i + 1);
  }
  return outward({ positions: Float64Array.from(positions), indices: Uint32Array.from(indices) });
}

/** A circle with its lowest part cut off level where its side leans 45°: counter-clockwise y, z. */
function profile(radius: number): [number, number][] {
  const from = -Math.PI / 4;
  const to = (5 * Math.PI) / 4;
  return Array.from({ length: SIDES + 1 }, (_, k) => {
    const angle = from + ((to - from) * k) / SIDES;
    return [radius * Math.cos(angle), radius * Math.sin(angle)];
  });
}

function outward(mesh: TriangleMesh): TriangleMesh {
  if (signedVolume(mesh) >= 0) return mesh;
  const indices = mesh.indices.slice();
  for (let t = 0; t < indices.length; t += 3)
    [indices[t + 1], indices[t + 2]] = [indices[t + 2], indices[t + 1]];
  return { ...mesh, indices };
}

function shown(value: number): string {
  return String(Number(value.toFixed(1)));
}
