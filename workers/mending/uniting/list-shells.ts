import { surfacesOf } from '../../../shared/geometry/mesh/edge-mates.js';
import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import { listByShell, shellVolumes } from '../../../shared/geometry/mesh/shells.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { buildWindingTree, type WindingTree } from '../remeshing/winding-tree.js';
import { pickTriangles } from './mesh-parts.js';

/** A closed surface with what is asked of it again and again. */
export interface Shell {
  readonly number: number;
  /** Negative for a hollow. */
  readonly volume: number;
  readonly min: readonly number[];
  readonly max: readonly number[];
  readonly mesh: TriangleMesh;
  /** Middles of some of its facets, flat xyz. */
  readonly samples: Float64Array;
  /** How often it winds around a point. Sorts its facets when first asked. */
  readonly windingAt: WindingTree['windingAt'];
}

const sampleCount = 16;

/** The surfaces of a closed mesh, by their first triangle. */
export function listShells(mesh: TriangleMesh): Shell[] {
  const surfaces = surfacesOf(mesh);
  const volumes = shellVolumes(mesh, surfaces);
  const { triangles, start } = listByShell(surfaces);
  return Array.from(volumes, (volume, number) => {
    const part = pickTriangles(mesh, triangles.subarray(start[number], start[number + 1]));
    const { min, max, size } = boundingBox(part.positions);
    let tree: WindingTree | undefined;
    const middle = min.map((value, axis) => value + size[axis] / 2);
    return {
      number,
      volume,
      min,
      max,
      mesh: part,
      samples: samplePoints(part),
      windingAt: (x, y, z) => (tree ??= buildWindingTree(part, middle)).windingAt(x, y, z),
    };
  });
}

function samplePoints({ positions, indices }: TriangleMesh): Float64Array {
  const triangles = indices.length / 3;
  const count = Math.min(sampleCount, triangles);
  const points = new Float64Array(3 * count);
  for (let i = 0; i < count; i++) {
    const first = 3 * Math.floor((i * triangles) / count);
    for (let corner = 0; corner < 3; corner++)
      for (let axis = 0; axis < 3; axis++)
        points[3 * i + axis] += positions[3 * indices[first + corner] + axis] / 3;
  }
  return points;
}

/** Winding numbers this far from a whole number are those of points on the surface. */
const nearWhole = 0.25;

/** What the samples of one shell say of another: lies it inside, outside, or partly each. */
export function placeOf(shell: Shell, other: Shell): 'inside' | 'outside' | 'partly' {
  let within = 0;
  let beyond = 0;
  for (let i = 0; i < shell.samples.length; i += 3) {
    const [x, y, z] = shell.samples.subarray(i, i + 3);
    const isInBox =
      x >= other.min[0] &&
      y >= other.min[1] &&
      z >= other.min[2] &&
      x <= other.max[0] &&
      y <= other.max[1] &&
      z <= other.max[2];
    const winding = isInBox ? other.windingAt(x, y, z) : 0;
    const whole = Math.round(winding);
    if (Math.abs(winding - whole) > nearWhole) continue;
    if (whole === 0) beyond++;
    else within++;
  }
  if (within === 0) return 'outside';
  return beyond === 0 ? 'inside' : 'partly';
}

export function boxesTouch(a: Shell, b: Shell): boolean {
  return (
    a.min[0] <= b.max[0] &&
    b.min[0] <= a.max[0] &&
    a.min[1] <= b.max[1] &&
    b.min[1] <= a.max[1] &&
    a.min[2] <= b.max[2] &&
    b.min[2] <= a.max[2]
  );
}
