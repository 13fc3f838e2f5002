import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { type JobContext, silentContext } from '../../runtime/job-context.js';

/** Answers how often a surface winds around points: 1 inside a closed one, 0 outside, between at holes. */
export interface WindingTree {
  readonly windingAt: (x: number, y: number, z: number) => number;
}

export interface WindingTreeOptions {
  readonly context?: JobContext;
  readonly farRadii?: number;
}

/** Triangles of a leaf at most. */
const leafSize = 8;
/** A cluster is far when it is farther off than this many of its radii; 2 in Barill et al., whose error
 *  is several times that of 3. */
const usualFarRadii = 3;
const stride = 16;
/** Where a node's numbers start in its row: the centre is first, then the square of the far distance. */
const FAR = 3;
const AREA = 4;
const MOMENT = 7;
const reportEvery = 1 << 12;

/**
 * Builds the tree for the generalised winding number of any set of triangles (A. Jacobson, L. Kavan and
 * O. Sorkine-Hornung, "Robust inside-outside segmentation using generalized winding numbers", ACM TOG
 * 32(4), 2013). Clusters that are far off count as a dipole and its first moment (G. Barill et al.,
 * "Fast winding numbers for soups and clouds", ACM TOG 37(4), 2018): the error stays below
 * 0.02 at 3 radii and falls with their cube. Triangles
 * close by count exactly (A. van Oosterom and J. Strackee, IEEE TBME 30(2), 1983). Needs at least one
 * triangle. 36 bytes a triangle and 76 a cluster, coordinates in single precision about the middle.
 */
export function buildWindingTree(
  mesh: TriangleMesh,
  middle: readonly number[],
  { context = silentContext, farRadii = usualFarRadii }: WindingTreeOptions = {},
): WindingTree {
  const count = mesh.indices.length / 3;
  const order = new Uint32Array(count).map((_, i) => i);
  const middles = triangleMiddles(mesh);
  const most = Math.max(1, Math.ceil((2 * count) / (leafSize / 2)) + 1);
  const rows = new Float32Array(stride * most);
  const skip = new Int32Array(most);
  const leafStart = new Int32Array(most);
  const leafCount = new Int32Array(most);
  const corners = new Float32Array(9 * count);
  let nodes = 0;
  /** Makes the node of a range of `order`, in pre-order; returns its sums in double precision. */
  const build = (from: number, to: number): Cluster => {
    const node = nodes++;
    if ((node & (reportEvery - 1)) === 0) context.progress('Sorting the facets', from / count);
    let cluster: Cluster;
    if (to - from <= leafSize) {
      leafStart[node] = 9 * from;
      leafCount[node] = to - from;
      for (let i = from; i < to; i++) copyCorners(mesh, order[i], middle, corners, 9 * i);
      cluster = leafCluster(corners, 9 * from, 9 * to);
    } else {
      const half = (from + to) >> 1;
      splitAtMedian(order, middles, from, to, half);
      cluster = joinClusters(build(from, half), build(half, to));
    }
    skip[node] = nodes;
    writeRow(rows, stride * node, cluster, farRadii);
    return cluster;
  };
  build(0, count);
  return { windingAt: walker({ nodes, rows, skip, leafStart, leafCount, corners }, middle) };
}

interface Cluster {
  readonly area: number;
  readonly centre: readonly number[];
  /** Sum of the area vectors. */
  readonly vector: readonly number[];
  /** First moment about the centre: area vector × place, row by row. */
  readonly moment: readonly number[];
  readonly low: readonly number[];
  readonly high: readonly number[];
}

function triangleMiddles({ positions, indices }: TriangleMesh): Float32Array {
  const middles = new Float32Array(indices.length);
  for (let i = 0; i < indices.length; i += 3) {
    const [a, b, c] = [3 * indices[i], 3 * indices[i + 1], 3 * indices[i + 2]];
    for (let axis = 0; axis < 3; axis++)
      middles[i + axis] = (positions[a + axis] + positions[b + axis] + positions[c + axis]) / 3;
  }
  return middles;
}

function copyCorners(
  { positions, indices }: TriangleMesh,
  triangle: number,
  middle: readonly number[],
  target: Float32Array,
  at: number,
): void {
  for (let corner = 0; corner < 3; corner++) {
    const from = 3 * indices[3 * triangle + corner];
    for (let axis = 0; axis < 3; axis++)
      target[at + 3 * corner + axis] = positions[from + axis] - middle[axis];
  }
}

/** Hoare's selection along the axis in which the middles spread most: those before `half` lie lower. */
function splitAtMedian(
  order: Uint32Array,
  middles: Float32Array,
  from: number,
  to: number,
  half: number,
): void {
  const axis = widestAxis(order, middles, from, to);
  let [left, right] = [from, to - 1];
  while (left < right) {
    const pivot = middles[3 * order[(left + right) >> 1] + axis];
    let [i, j] = [left, right];
    while (i <= j) {
      while (middles[3 * order[i] + axis] < pivot) i++;
      while (middles[3 * order[j] + axis] > pivot) j--;
      if (i > j) break;
      const kept = order[i];
      order[i++] = order[j];
      order[j--] = kept;
    }
    if (half <= j) right = j;
    else if (half >= i) left = i;
    else return;
  }
}

function widestAxis(order: Uint32Array, middles: Float32Array, from: number, to: number): number {
  let best = 0;
  let widest = -1;
  for (let axis = 0; axis < 3; axis++) {
    let [low, high] = [Infinity, -Infinity];
    for (let i = from; i < to; i++) {
      const value = middles[3 * order[i] + axis];
      if (value < low) low = value;
      if (value > high) high = value;
    }
    if (high - low <= widest) continue;
    widest = high - low;
    best = axis;
  }
  return best;
}

function leafCluster(corners: Float32Array, from: number, to: number): Cluster {
  let whole: Cluster | null = null;
  for (let at = from; at < to; at += 9) {
    const [ax, ay, az, bx, by, bz, cx, cy, cz] = corners.subarray(at, at + 9);
    const vector = [
      ((by - ay) * (cz - az) - (bz - az) * (cy - ay)) / 2,
      ((bz - az) * (cx - ax) - (bx - ax) * (cz - az)) / 2,
      ((bx - ax) * (cy - ay) - (by - ay) * (cx - ax)) / 2,
    ];
    const one: Cluster = {
      area: Math.hypot(...vector),
      centre: [(ax + bx + cx) / 3, (ay + by + cy) / 3, (az + bz + cz) / 3],
      vector,
      moment: [0, 0, 0, 0, 0, 0, 0, 0, 0],
      low: [Math.min(ax, bx, cx), Math.min(ay, by, cy), Math.min(az, bz, cz)],
      high: [Math.max(ax, bx, cx), Math.max(ay, by, cy), Math.max(az, bz, cz)],
    };
    whole = whole ? joinClusters(whole, one) : one;
  }
  return whole!;
}

function joinClusters(one: Cluster, other: Cluster): Cluster {
  const area = one.area + other.area;
  const share = area > 0 ? other.area / area : 0.5;
  const centre = one.centre.map((value, axis) => value + share * (other.centre[axis] - value));
  const moment = one.moment.map((value, k) => {
    const [row, column] = [(k / 3) | 0, k % 3];
    return (
      value +
      other.moment[k] +
      one.vector[row] * (one.centre[column] - centre[column]) +
      other.vector[row] * (other.centre[column] - centre[column])
    );
  });
  return {
    area,
    centre,
    vector: one.vector.map((value, axis) => value + other.vector[axis]),
    moment,
    low: one.low.map((value, axis) => Math.min(value, other.low[axis])),
    high: one.high.map((value, axis) => Math.max(value, other.high[axis])),
  };
}

function writeRow(rows: Float32Array, at: number, cluster: Cluster, farRadii: number): void {
  const { centre, vector, moment: m, low, high } = cluster;
  let radius = 0;
  for (let axis = 0; axis < 3; axis++)
    radius += Math.max(centre[axis] - low[axis], high[axis] - centre[axis]) ** 2;
  rows.set(centre, at);
  rows[at + FAR] = farRadii * farRadii * radius;
  rows.set(vector, at + AREA);
  rows.set(
    [m[0] + m[4] + m[8], m[0], m[4], m[8], m[1] + m[3], m[5] + m[7], m[6] + m[2]],
    at + MOMENT,
  );
}

interface Nodes {
  readonly nodes: number;
  readonly rows: Float32Array;
  /** First node after those below this one. */
  readonly skip: Int32Array;
  readonly leafStart: Int32Array;
  /** 0 for nodes with children, which follow directly. */
  readonly leafCount: Int32Array;
  readonly corners: Float32Array;
}

function walker(tree: Nodes, middle: readonly number[]): WindingTree['windingAt'] {
  const { nodes, rows, skip, leafStart, leafCount, corners } = tree;
  const [mx, my, mz] = middle;
  return (px, py, pz) => {
    const x = px - mx;
    const y = py - my;
    const z = pz - mz;
    let sum = 0;
    let node = 0;
    while (node < nodes) {
      const at = stride * node;
      const rx = rows[at] - x;
      const ry = rows[at + 1] - y;
      const rz = rows[at + 2] - z;
      const square = rx * rx + ry * ry + rz * rz;
      if (square > rows[at + FAR]) {
        const bent =
          rows[at + 8] * rx * rx +
          rows[at + 9] * ry * ry +
          rows[at + 10] * rz * rz +
          rows[at + 11] * rx * ry +
          rows[at + 12] * ry * rz +
          rows[at + 13] * rz * rx;
        const straight = rows[at + AREA] * rx + rows[at + 5] * ry + rows[at + 6] * rz;
        sum += (straight + rows[at + MOMENT] - (3 * bent) / square) / (square * Math.sqrt(square));
        node = skip[node];
      } else if (leafCount[node] > 0) {
        const from = leafStart[node];
        const to = from + 9 * leafCount[node];
        for (let i = from; i < to; i += 9) sum += solidAngle(corners, i, x, y, z);
        node = skip[node];
      } else node++;
    }
    return sum / (4 * Math.PI);
  };
}

/** Solid angle of a triangle seen from a point, positive from behind: from inside the solid. */
function solidAngle(p: Float32Array, i: number, x: number, y: number, z: number): number {
  const ax = p[i] - x;
  const ay = p[i + 1] - y;
  const az = p[i + 2] - z;
  const bx = p[i + 3] - x;
  const by = p[i + 4] - y;
  const bz = p[i + 5] - z;
  const cx = p[i + 6] - x;
  const cy = p[i + 7] - y;
  const cz = p[i + 8] - z;
  const a = Math.sqrt(ax * ax + ay * ay + az * az);
  const b = Math.sqrt(bx * bx + by * by + bz * bz);
  const c = Math.sqrt(cx * cx + cy * cy + cz * cz);
  const volume = ax * (by * cz - bz * cy) + ay * (bz * cx - bx * cz) + az * (bx * cy - by * cx);
  const below =
    a * b * c +
    (ax * bx + ay * by + az * bz) * c +
    (bx * cx + by * cy + bz * cz) * a +
    (cx * ax + cy * ay + cz * az) * b;
  return 2 * Math.atan2(volume, below);
}
