import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import type { JobContext } from '../../runtime/job-context.js';
import { CellGrid } from './cell-grid.js';
import { IntegerTable } from './integer-table.js';
import { marchTetrahedra, type Node } from './march-tetrahedra.js';
import { buildWindingTree, type WindingTree } from './winding-tree.js';

/** Bounds memory: about 100 bytes a cell. */
const mostCells = 12_000_000;
/** Halvings of an edge across a hole: to a hundredth of a cell. */
const halvings = 7;
const insideLevel = 0.5;

/**
 * The surface where the absolute winding number of a soup is one half, from a sparse grid: cubes that
 * triangles touch, and from there along every face whose nodes are of both kinds, so that the surface
 * runs on across holes. A cube's nodes are evaluated once.
 */
export function drawIsoSurface(
  mesh: TriangleMesh,
  cells: number,
  context: JobContext,
): { mesh: TriangleMesh; step: number } | { refusal: string } {
  const grid = new CellGrid(mesh, cells);
  const triangles = mesh.indices.length / 3;
  for (let triangle = 0; triangle < triangles; triangle++) {
    grid.addTriangle(triangle);
    if ((triangle & 4095) === 0) context.progress('Rebuilding', (0.1 * triangle) / triangles);
    if (grid.cells.length > mostCells) return tooFine;
  }
  const { min, size } = boundingBox(mesh.positions);
  const tree = buildWindingTree(
    mesh,
    [0, 1, 2].map((axis) => min[axis] + size[axis] / 2),
  );
  context.progress('Rebuilding', 0.15);
  const isInner = nodeTester(grid, tree);
  const isComplete = followAcrossHoles(grid, isInner, (fraction) =>
    context.progress('Rebuilding', 0.15 + 0.55 * fraction),
  );
  if (!isComplete) return tooFine;
  const meets = crossingFinder(mesh, grid, tree);
  const drawn = marchTetrahedra(grid, isInner, meets, (fraction) =>
    context.progress('Rebuilding', 0.7 + 0.3 * fraction),
  );
  return { mesh: drawn, step: grid.step };
}

const tooFine = {
  refusal:
    'The surface fills too many cells at this fineness. Choose fewer cells along its longest side.',
};

/** Whether a node lies inside, each worked out once. */
function nodeTester(grid: CellGrid, tree: WindingTree): (node: number) => boolean {
  const known = new IntegerTable(2 * grid.cells.length);
  const at = new Int32Array(3);
  const { origin, step } = grid;
  return (node) => {
    const before = known.get(node);
    if (before >= 0) return before === 1;
    grid.locate(node, at);
    const winding = tree.windingAt(
      origin[0] + step * at[0],
      origin[1] + step * at[1],
      origin[2] + step * at[2],
    );
    const isInner = Math.abs(winding) > insideLevel;
    known.set(node, isInner ? 1 : 0);
    return isInner;
  };
}

/** Directions to the six neighbours with the corners (bits x, y, z) of the face between. */
const faces = [
  { step: [-1, 0, 0], corners: [0, 2, 4, 6] },
  { step: [1, 0, 0], corners: [1, 3, 5, 7] },
  { step: [0, -1, 0], corners: [0, 1, 4, 5] },
  { step: [0, 1, 0], corners: [2, 3, 6, 7] },
  { step: [0, 0, -1], corners: [0, 1, 2, 3] },
  { step: [0, 0, 1], corners: [4, 5, 6, 7] },
] as const;

/** Keeps every cube that the surface runs into. @returns false when there are too many */
function followAcrossHoles(
  grid: CellGrid,
  isInner: (node: number) => boolean,
  onProgress: (fraction: number) => void,
): boolean {
  const at = new Int32Array(3);
  const inner = new Uint8Array(8);
  for (let place = 0; place < grid.cells.length; place++) {
    if ((place & 2047) === 0) onProgress(place / grid.cells.length);
    if (grid.cells.length > mostCells) return false;
    grid.locate(grid.cells[place], at);
    const [i, j, k] = at;
    let count = 0;
    for (let corner = 0; corner < 8; corner++) {
      const node = grid.number(i + (corner & 1), j + ((corner >> 1) & 1), k + (corner >> 2));
      inner[corner] = isInner(node) ? 1 : 0;
      count += inner[corner];
    }
    if (count === 0 || count === 8) continue;
    for (const { step, corners } of faces) {
      const onFace = corners.reduce((sum: number, corner) => sum + inner[corner], 0);
      if (onFace === 0 || onFace === 4) continue;
      const [ni, nj, nk] = [i + step[0], j + step[1], k + step[2]];
      if (grid.isInside(ni, nj, nk)) grid.keep(grid.number(ni, nj, nk));
    }
  }
  return true;
}

/** Where grid edges meet the triangles of their cube; across a hole where the winding passes one half. */
function crossingFinder(mesh: TriangleMesh, grid: CellGrid, tree: WindingTree) {
  const shares: number[] = [];
  return (inner: Node, outer: Node, place: number): number => {
    shares.length = 0;
    grid.trianglesAt(place, (triangle) => {
      const share = meetingShare(mesh, triangle, inner, outer);
      if (share >= 0) shares.push(share);
    });
    if (shares.length > 0) {
      shares.sort((a, b) => a - b);
      return shares[shares.length >> 1];
    }
    let [low, high] = [0, 1];
    for (let i = 0; i < halvings; i++) {
      const middle = (low + high) / 2;
      const winding = tree.windingAt(
        inner.x + middle * (outer.x - inner.x),
        inner.y + middle * (outer.y - inner.y),
        inner.z + middle * (outer.z - inner.z),
      );
      if (Math.abs(winding) > insideLevel) low = middle;
      else high = middle;
    }
    return (low + high) / 2;
  };
}

/** Share of the way at which a segment meets a triangle, -1 when it does not (T. Möller and
 *  B. Trumbore, J. Graphics Tools 2(1), 1997). */
function meetingShare(
  { positions: p, indices }: TriangleMesh,
  triangle: number,
  from: Node,
  to: Node,
): number {
  const a = 3 * indices[3 * triangle];
  const b = 3 * indices[3 * triangle + 1];
  const c = 3 * indices[3 * triangle + 2];
  const dx = to.x - from.x;
  const dy = to.y - from.y;
  const dz = to.z - from.z;
  const ux = p[b] - p[a];
  const uy = p[b + 1] - p[a + 1];
  const uz = p[b + 2] - p[a + 2];
  const vx = p[c] - p[a];
  const vy = p[c + 1] - p[a + 1];
  const vz = p[c + 2] - p[a + 2];
  const px = dy * vz - dz * vy;
  const py = dz * vx - dx * vz;
  const pz = dx * vy - dy * vx;
  const determinant = ux * px + uy * py + uz * pz;
  if (determinant === 0) return -1;
  const sx = from.x - p[a];
  const sy = from.y - p[a + 1];
  const sz = from.z - p[a + 2];
  const u = (sx * px + sy * py + sz * pz) / determinant;
  if (u < 0 || u > 1) return -1;
  const qx = sy * uz - sz * uy;
  const qy = sz * ux - sx * uz;
  const qz = sx * uy - sy * ux;
  const v = (dx * qx + dy * qy + dz * qz) / determinant;
  if (v < 0 || u + v > 1) return -1;
  const share = (vx * qx + vy * qy + vz * qz) / determinant;
  return share >= 0 && share <= 1 ? share : -1;
}
