import { outerVertices } from '../../shared/geometry/fitting/outer-vertices.js';
import { boundingBox, signedVolume } from '../../shared/geometry/mesh/measure.js';
import { splitIntoSolids } from '../../shared/geometry/mesh/solids.js';
import { type TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { cutMesh } from '../../shared/geometry/cutting/cut-mesh.js';
import { type Plane } from '../../shared/geometry/vectors/plane.js';
import { cellsInFrames, extentsOf, roomInFrames } from './fit-frames.js';
import { type BodySupport, leastSupport } from './judging/body-support.js';
import { bendingStress, bondedSection, type Side, sideOf } from './judging/seam-strength.js';
import { partZones, type PlanZone } from './judging/plan-zone.js';
import { poseExactly } from './pose-exactly.js';
import { type SearchSpace } from './search-space.js';
import { trialCaps } from './trial-caps.js';

/** One loose solid of the trial model. */
export interface PlanBody {
  readonly mesh: TriangleMesh;
  /** The vertices that decide extents, flat xyz: all, or an outer selection of many. */
  readonly outer: Float64Array;
  readonly volumeMm3: number;
  /** Middle of its volume. */
  readonly middle: Side['middle'];
  /** Whether it fits the space, laid in its best orientation. */
  readonly fits: boolean;
  /** Rough number of spaces it fills; 1 when it fits. */
  readonly cells: number;
}

/** What lies in one leaf of a growing tree: every further plane cuts all of its bodies. */
export interface PlanPart {
  readonly bodies: readonly PlanBody[];
  /** The keep-whole zones in here: no further plane may cross them. */
  readonly zones: readonly PlanZone[];
}

/** Caps of all trial cuts are told apart by their tags, whatever search made them. */
let nextCapTag = 1;

/** Cut area that a plane leaves on a part, and the two parts. */
export interface PartSplit {
  readonly above: PlanPart;
  readonly below: PlanPart;
  readonly seamMm2: number;
  /** Bending stress of the most strained of the bodies' seams, kPa. */
  readonly bendingKpa: number;
}

export function partOf(
  mesh: TriangleMesh,
  space: SearchSpace,
  zones: readonly PlanZone[] = [],
): PlanPart {
  return { bodies: bodiesOf(mesh, space), zones };
}

export function fitsWhole(part: PlanPart): boolean {
  return part.bodies.every((body) => body.fits);
}

/**
 * Cuts every body of a part that the plane crosses. Whoever asks
 * has made sure that no zone is crossed; one that is goes with the side above.
 */
export function splitPart(part: PlanPart, plane: Plane, space: SearchSpace): PartSplit {
  const capTag = nextCapTag++;
  const above: PlanBody[] = [];
  const below: PlanBody[] = [];
  let seamMm2 = 0;
  let bendingKpa = 0;
  for (const body of part.bodies) {
    const cut = cutMesh(body.mesh, plane, { triangulate: trialCaps, capTag });
    if (cut.below === body.mesh) below.push(body);
    else if (cut.above === body.mesh) above.push(body);
    else {
      seamMm2 += cut.sectionAreaMm2;
      const section = bondedSection(cut.below, plane, capTag);
      if (section)
        bendingKpa = Math.max(
          bendingKpa,
          bendingStress(section, sideOf([cut.above]), sideOf([cut.below])),
        );
      above.push(...bodiesOf(cut.above, space));
      below.push(...bodiesOf(cut.below, space));
    }
  }
  const zones = partZones(part.zones, plane) ?? { above: part.zones, below: [] };
  return {
    above: { bodies: above, zones: zones.above },
    below: { bodies: below, zones: zones.below },
    seamMm2,
    bendingKpa,
  };
}

function bodiesOf(mesh: TriangleMesh, space: SearchSpace): PlanBody[] {
  if (mesh.indices.length === 0) return [];
  return joinStrayCavities(splitIntoSolids(mesh)).map((solid) => measureBody(solid, space));
}

/**
 * Fans of dented loops can hide from the kernel which solid a cavity belongs to (its cap lies in
 * its owner's cap). A stray cavity goes to the smallest solid whose box holds it; without one it
 * bounds nothing and is dropped.
 */
function joinStrayCavities(solids: readonly TriangleMesh[]): TriangleMesh[] {
  if (solids.length === 1) return [...solids];
  const hulls: { mesh: TriangleMesh; parts: TriangleMesh[] }[] = [];
  const strays: TriangleMesh[] = [];
  for (const mesh of solids) {
    if (signedVolume(mesh) > 0) hulls.push({ mesh, parts: [mesh] });
    else strays.push(mesh);
  }
  if (strays.length === 0) return [...solids];
  for (const stray of strays) {
    const inner = boundingBox(stray.positions);
    const owner = hulls.findLast(({ mesh }) => {
      const outer = boundingBox(mesh.positions);
      return [0, 1, 2].every(
        (axis) => outer.min[axis] <= inner.min[axis] && outer.max[axis] >= inner.max[axis],
      );
    });
    owner?.parts.push(stray);
  }
  return hulls.map(({ parts }) => joinMeshes(parts));
}

export function joinMeshes(parts: readonly TriangleMesh[]): TriangleMesh {
  if (parts.length === 1) return parts[0];
  const vertices = parts.reduce((sum, part) => sum + part.positions.length, 0);
  const corners = parts.reduce((sum, part) => sum + part.indices.length, 0);
  const positions = new Float64Array(vertices);
  const indices = new Uint32Array(corners);
  const tags = new Int32Array(corners / 3);
  let v = 0;
  let c = 0;
  for (const part of parts) {
    positions.set(part.positions, v);
    for (let k = 0; k < part.indices.length; k++) indices[c + k] = part.indices[k] + v / 3;
    if (part.tags) tags.set(part.tags, c / 3);
    v += part.positions.length;
    c += part.indices.length;
  }
  return { positions, indices, tags };
}

let low = new Float64Array(0);
let high = new Float64Array(0);

/** A part that is over by more than this share of the space in every frame is not looked at again. */
const NEAR_SHARE = 0.15;

function measureBody(mesh: TriangleMesh, space: SearchSpace): PlanBody {
  const { fitFrames } = space;
  if (low.length < fitFrames.axisCount) {
    low = new Float64Array(fitFrames.axisCount);
    high = new Float64Array(fitFrames.axisCount);
  }
  const outer = outerVertices(mesh.positions);
  extentsOf(fitFrames, outer, low, high);
  let room = roomInFrames(fitFrames, low, high);
  const cells = Math.max(2, cellsInFrames(fitFrames, space.cells, low, high));
  // The selection can only be too small, so what is far over stays over.
  if (outer !== mesh.positions && isNear(room, space)) {
    extentsOf(fitFrames, mesh.positions, low, high);
    room = roomInFrames(fitFrames, low, high);
  }
  const fits = room >= 0 || (isNear(room, space) && poseExactly(mesh, space.fits, outer).fits);
  return { mesh, outer, ...sideOf([mesh]), fits, cells: fits ? 1 : cells };
}

function isNear(room: number, { leastSideMm }: SearchSpace): boolean {
  return room > -NEAR_SHARE * leastSideMm;
}

/** Columns across a trial body, and resting directions looked at: as coarse as ranks bodies well. */
const TRIAL_COLUMNS = 36;
const TRIAL_TRIES = 3;

const supports = new WeakMap<PlanBody, BodySupport | null>();

/** Support of a trial body that fits, in its own best orientation, mm³; found once a body. */
export function supportOf(body: PlanBody, { fits, overhangDegrees }: SearchSpace): number {
  let known = supports.get(body);
  if (known === undefined) {
    known = leastSupport(
      body.mesh,
      { spaces: fits, overhangDegrees, columns: TRIAL_COLUMNS, tries: TRIAL_TRIES },
      body.outer,
    );
    supports.set(body, known);
  }
  // Only a diagonal holds it: as much support as a pyramid of its own volume, a rough guess.
  return known?.supportMm3 ?? body.volumeMm3;
}
