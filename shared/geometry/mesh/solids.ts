import { windingNumber } from '../spatial/point-in-mesh.js';
import { boundingBox, type BoundingBox, signedVolume } from './measure.js';
import { connectedShells, listByShell, type Shells, shellVolumes } from './shells.js';
import { type TriangleMesh } from './triangle-mesh.js';

export { connectedShells, shellVolumes } from './shells.js';

/**
 * Takes a closed mesh apart into its solids: each shell of positive volume together with the
 * cavities (shells of negative volume) that lie directly inside it. A cavity belongs to the
 * smallest shell that contains it; one inside no shell (a body turned inside out) and a shell of
 * no volume stand alone. A mesh of one shell is returned as it is.
 * @returns solids by falling |volume|, equal ones by their boxes: first the smaller minimum along x,
 *   then y, then z. Triangles keep their order; vertices
 *   are numbered in order of use.
 * O(triangles), plus one scan of the enclosing shells a cavity.
 */
export function splitIntoSolids(mesh: TriangleMesh): TriangleMesh[] {
  if (mesh.indices.length === 0) return [];
  const shells = connectedShells(mesh);
  if (shells.count === 1) return [mesh];
  const owner = assignCavities(mesh, shells);
  const solids = extractGroups(mesh, shells, owner);
  return solids
    .map((solid) => ({
      solid,
      volume: Math.abs(signedVolume(solid)),
      box: boundingBox(solid.positions),
    }))
    .sort((a, b) => b.volume - a.volume || compareBoxes(a.box, b.box))
    .map(({ solid }) => solid);
}

function compareBoxes(a: BoundingBox, b: BoundingBox): number {
  return a.min[0] - b.min[0] || a.min[1] - b.min[1] || a.min[2] - b.min[2];
}

/** For each shell the shell whose solid it belongs to, itself included. */
function assignCavities(mesh: TriangleMesh, shells: Shells): Int32Array {
  const volumes = shellVolumes(mesh, shells);
  const owner = Int32Array.from({ length: shells.count }, (_, shell) => shell);
  const hulls: number[] = [];
  for (let shell = 0; shell < shells.count; shell++) if (volumes[shell] > 0) hulls.push(shell);
  if (hulls.length === shells.count) return owner;
  // Smallest first: the first that contains a cavity is the one it lies directly inside.
  hulls.sort((a, b) => volumes[a] - volumes[b]);
  const { triangles, start } = listByShell(shells);
  const boxes = shellBoxes(mesh, shells);
  for (let shell = 0; shell < shells.count; shell++) {
    if (!(volumes[shell] < 0)) continue;
    const samples = largestTriangles(mesh, triangles, start[shell], start[shell + 1]);
    for (const hull of hulls) {
      if (volumes[hull] <= -volumes[shell] || !boxContains(boxes, hull, shell)) continue;
      if (isInside(mesh, triangles, start[hull], start[hull + 1], samples)) {
        owner[shell] = hull;
        break;
      }
    }
  }
  return owner;
}

/** How many of a cavity's triangles vote on where it lies, so that one on a touching wall cannot. */
const SAMPLES = 3;

/** The middles of its largest triangles: away from vertices and edges where shells may touch. */
function largestTriangles(
  { positions, indices }: TriangleMesh,
  triangles: Uint32Array,
  from: number,
  to: number,
): number[][] {
  const best: { area: number; middle: number[] }[] = [];
  for (let i = from; i < to; i++) {
    const [a, b, c] = [0, 1, 2].map((corner) => 3 * indices[3 * triangles[i] + corner]);
    const ux = positions[b] - positions[a];
    const uy = positions[b + 1] - positions[a + 1];
    const uz = positions[b + 2] - positions[a + 2];
    const vx = positions[c] - positions[a];
    const vy = positions[c + 1] - positions[a + 1];
    const vz = positions[c + 2] - positions[a + 2];
    const area = Math.hypot(uy * vz - uz * vy, uz * vx - ux * vz, ux * vy - uy * vx);
    if (best.length === SAMPLES && area <= best[SAMPLES - 1].area) continue;
    const middle = [0, 1, 2].map(
      (axis) => (positions[a + axis] + positions[b + axis] + positions[c + axis]) / 3,
    );
    best.push({ area, middle });
    best.sort((one, other) => other.area - one.area);
    best.length = Math.min(best.length, SAMPLES);
  }
  return best.map(({ middle }) => middle);
}

function isInside(
  mesh: TriangleMesh,
  triangles: Uint32Array,
  from: number,
  to: number,
  samples: readonly number[][],
): boolean {
  let votes = 0;
  for (const [x, y, z] of samples) {
    const winding = windingNumber(mesh.positions, mesh.indices, triangles, from, to, x, y, z);
    votes += winding > 0 ? 1 : -1;
  }
  return votes > 0;
}

/** Six numbers a shell: minimum xyz, maximum xyz. */
function shellBoxes({ positions, indices }: TriangleMesh, { labels, count }: Shells): Float64Array {
  const boxes = new Float64Array(6 * count);
  for (let shell = 0; shell < count; shell++) {
    boxes.fill(Infinity, 6 * shell, 6 * shell + 3);
    boxes.fill(-Infinity, 6 * shell + 3, 6 * shell + 6);
  }
  for (let i = 0; i < indices.length; i++) {
    const at = 6 * labels[(i / 3) | 0];
    const from = 3 * indices[i];
    for (let axis = 0; axis < 3; axis++) {
      const value = positions[from + axis];
      if (value < boxes[at + axis]) boxes[at + axis] = value;
      if (value > boxes[at + 3 + axis]) boxes[at + 3 + axis] = value;
    }
  }
  return boxes;
}

function boxContains(boxes: Float64Array, outer: number, inner: number): boolean {
  for (let axis = 0; axis < 3; axis++) {
    if (boxes[6 * outer + axis] > boxes[6 * inner + axis]) return false;
    if (boxes[6 * outer + 3 + axis] < boxes[6 * inner + 3 + axis]) return false;
  }
  return true;
}

/** One mesh for each shell that owns itself, with all shells that it owns. */
function extractGroups(mesh: TriangleMesh, shells: Shells, owner: Int32Array): TriangleMesh[] {
  const groupOf = new Int32Array(shells.count);
  let groups = 0;
  for (let shell = 0; shell < shells.count; shell++) {
    if (owner[shell] === shell) groupOf[shell] = groups++;
  }
  const labels = new Int32Array(shells.labels.length);
  for (let triangle = 0; triangle < labels.length; triangle++) {
    labels[triangle] = groupOf[owner[shells.labels[triangle]]];
  }
  const { triangles, start } = listByShell({ labels, count: groups });
  const numberOf = new Int32Array(mesh.positions.length / 3);
  const groupUsing = new Int32Array(numberOf.length).fill(-1);
  const vertices = new Uint32Array(numberOf.length);
  const solids: TriangleMesh[] = [];
  for (let group = 0; group < groups; group++) {
    const list = triangles.subarray(start[group], start[group + 1]);
    solids.push(extract(mesh, list, group, numberOf, groupUsing, vertices));
  }
  return solids;
}

function extract(
  mesh: TriangleMesh,
  list: Uint32Array,
  group: number,
  numberOf: Int32Array,
  groupUsing: Int32Array,
  vertices: Uint32Array,
): TriangleMesh {
  const indices = new Uint32Array(3 * list.length);
  const tags = new Int32Array(list.length);
  let used = 0;
  for (let i = 0, at = 0; i < list.length; i++) {
    const first = 3 * list[i];
    for (let corner = first; corner < first + 3; corner++) {
      const vertex = mesh.indices[corner];
      if (groupUsing[vertex] !== group) {
        groupUsing[vertex] = group;
        numberOf[vertex] = used;
        vertices[used++] = vertex;
      }
      indices[at++] = numberOf[vertex];
    }
  }
  if (mesh.tags !== undefined) {
    for (let i = 0; i < list.length; i++) tags[i] = mesh.tags[list[i]];
  }
  const positions = new Float64Array(3 * used);
  for (let i = 0, at = 0; i < used; i++) {
    const from = 3 * vertices[i];
    positions[at++] = mesh.positions[from];
    positions[at++] = mesh.positions[from + 1];
    positions[at++] = mesh.positions[from + 2];
  }
  return { positions, indices, tags };
}
