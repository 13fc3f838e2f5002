import type { BoundingBox } from '../../shared/geometry/mesh/measure.js';
import { listByShell, shellVolumes, type Shells } from '../../shared/geometry/mesh/shells.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { windingNumber } from '../../shared/geometry/spatial/point-in-mesh.js';

export interface ShellNesting {
  /** Signed volume of each shell, file units³. */
  readonly volumes: Float64Array;
  /** How many shells lie wholly around each shell: 0 outermost, 1 a hollow or a part inside, … */
  readonly depths: Int32Array;
  /** Shells that lie partly inside another one. Only those whose box lies inside the other's box are found. */
  readonly crossing: number;
  /** 1 for each of them. */
  readonly crosses: Uint8Array;
  /** Whether every pair that could be nested was tested; with very many shells the rest is left out. */
  readonly complete: boolean;
}

/** Points of a shell that are tested; all must agree before it counts as inside. */
const sampleCount = 7;
/** Bounds the work on files of very many shells: box pairs plus facets tested. Some ten seconds. */
const mostWork = 2e9;

/**
 * How the shells of a closed mesh lie inside each other, whichever way they wind: by the winding
 * number of sample points (middles of facets spread over the shell), so meshes may be inside out.
 */
export function nestShells(mesh: TriangleMesh, shells: Shells): ShellNesting {
  const volumes = shellVolumes(mesh, shells);
  const depths = new Int32Array(shells.count);
  const crosses = new Uint8Array(shells.count);
  if (shells.count === 1) return { volumes, depths, crossing: 0, crosses, complete: true };
  const { triangles, start } = listByShell(shells);
  const boxes = Array.from({ length: shells.count }, (_, shell) =>
    boxOf(mesh, triangles, start[shell], start[shell + 1]),
  );
  // Only a larger shell can lie around a smaller one.
  const bySize = Array.from(volumes.keys()).sort(
    (a, b) => Math.abs(volumes[b]) - Math.abs(volumes[a]),
  );
  let crossing = 0;
  let work = 0;
  for (let i = 1; i < bySize.length; i++) {
    const inner = bySize[i];
    let isCrossing = false;
    let samples: Float64Array | undefined;
    for (let j = 0; j < i; j++) {
      const outer = bySize[j];
      work++;
      if (!contains(boxes[outer], boxes[inner])) continue;
      work += sampleCount * (start[outer + 1] - start[outer]);
      if (work > mostWork) return { volumes, depths, crossing, crosses, complete: false };
      samples ??= samplePoints(mesh, triangles, start[inner], start[inner + 1]);
      let within = 0;
      for (let k = 0; k < samples.length; k += 3) {
        const winding = windingNumber(
          mesh.positions,
          mesh.indices,
          triangles,
          start[outer],
          start[outer + 1],
          samples[k],
          samples[k + 1],
          samples[k + 2],
        );
        if (Math.abs(winding) > 0.5) within++;
      }
      if (within === samples.length / 3) depths[inner]++;
      else if (within > 0) isCrossing = true;
    }
    if (!isCrossing) continue;
    crossing++;
    crosses[inner] = 1;
  }
  return { volumes, depths, crossing, crosses, complete: true };
}

/** Middles of facets, evenly through the shell's list. */
function samplePoints(
  { positions, indices }: TriangleMesh,
  triangles: Uint32Array,
  from: number,
  to: number,
): Float64Array {
  const count = Math.min(sampleCount, to - from);
  const points = new Float64Array(3 * count);
  for (let i = 0; i < count; i++) {
    const triangle = triangles[from + Math.floor((i * (to - from)) / count)];
    for (let corner = 0; corner < 3; corner++) {
      const at = 3 * indices[3 * triangle + corner];
      for (let axis = 0; axis < 3; axis++) points[3 * i + axis] += positions[at + axis] / 3;
    }
  }
  return points;
}

function boxOf(
  { positions, indices }: TriangleMesh,
  triangles: Uint32Array,
  from: number,
  to: number,
): Pick<BoundingBox, 'min' | 'max'> {
  const min: [number, number, number] = [Infinity, Infinity, Infinity];
  const max: [number, number, number] = [-Infinity, -Infinity, -Infinity];
  for (let i = from; i < to; i++)
    for (let corner = 0; corner < 3; corner++) {
      const at = 3 * indices[3 * triangles[i] + corner];
      for (let axis = 0; axis < 3; axis++) {
        const value = positions[at + axis];
        if (value < min[axis]) min[axis] = value;
        if (value > max[axis]) max[axis] = value;
      }
    }
  return { min, max };
}

function contains(
  outer: Pick<BoundingBox, 'min' | 'max'>,
  inner: Pick<BoundingBox, 'min' | 'max'>,
): boolean {
  for (let axis = 0; axis < 3; axis++)
    if (outer.min[axis] > inner.min[axis] || outer.max[axis] < inner.max[axis]) return false;
  return true;
}
