import { type Body, countCuts, type PlaneTree } from '../../shared/geometry/cutting/apply-tree.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { spaceInWords } from '../../shared/geometry/fitting/space-measures.js';
import { type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { type CutTree } from '../../shared/jobs/recipe.js';
import { leafPath } from './exact-plan.js';
import { rangeAlong } from './sweep-tables.js';

/** The recipe's tree: offsets as really used, every cut with a sentence of real numbers. */
export function explainTree(
  tree: PlaneTree,
  bodies: readonly Body[],
  offsets: readonly number[],
  space: BuildSpace,
): CutTree {
  const seams = seamAreas(bodies, offsets.length);
  const explain = (node: PlaneTree, path: string, first: number): CutTree => {
    if (node.kind === 'leaf') return { kind: 'leaf' };
    const { normal } = node.plane;
    const reason = cutReason(normal, sideOf(`${path}a`), sideOf(`${path}b`), seams[first], space);
    return {
      kind: 'cut',
      plane: { normal: [normal[0], normal[1], normal[2]], offset: offsets[first] },
      reason,
      above: explain(node.above, `${path}a`, first + 1),
      below: explain(node.below, `${path}b`, first + 1 + countCuts(node.above)),
    };
  };
  const sideOf = (path: string) => bodies.filter((body) => leafPath(body).startsWith(path));
  return explain(tree, '', 0);
}

function cutReason(
  normal: Vector3,
  above: readonly Body[],
  below: readonly Body[],
  seamMm2: number,
  space: BuildSpace,
): string {
  const along = directionInWords(normal);
  const mm = (length: number) => `${Number(length.toFixed(length < 10 ? 1 : 0))} mm`;
  const pieces = (count: number) => `${count} ${count === 1 ? 'piece' : 'pieces'}`;
  const [a, b] = [extent(above, normal), extent(below, normal)];
  if (above.length === 0 || below.length === 0)
    return `Meets nothing here: one side along ${along} is empty.`;
  if (seamMm2 <= 0)
    return `Parts loose bodies along ${along} without cutting any, so that ${pieces(above.length)} above and ${pieces(below.length)} below are planned apart.`;
  const seam = `seam area ${areaInWords(seamMm2)}`;
  const whole = mm(extent([...above, ...below], normal));
  if (above.length === 1 && below.length === 1)
    return `Splits ${whole} along ${along} into parts of ${mm(a)} and ${mm(b)} so that both fit ${spaceInWords(space)}; ${seam}.`;
  if (above.length === 1 || below.length === 1) {
    const [taken, left, rest] = above.length === 1 ? [a, b, below] : [b, a, above];
    return `Takes ${mm(taken)} of ${whole} along ${along} off as one piece that fits ${spaceInWords(space)}; the other ${mm(left)} become ${pieces(rest.length)}; ${seam}.`;
  }
  return `Divides ${whole} along ${along} into ${mm(a)} (${pieces(above.length)}) and ${mm(b)} (${pieces(below.length)}); ${seam}.`;
}

function directionInWords(normal: Vector3): string {
  const axis = normal.findIndex((c) => Math.abs(c) > 1 - 1e-9);
  if (axis >= 0) return 'xyz'[axis];
  return `the direction (${normal.map((c) => Number(c.toFixed(2))).join(', ')})`;
}

function areaInWords(mm2: number): string {
  return mm2 < 100 ? `${mm2.toFixed(0)} mm²` : `${(mm2 / 100).toFixed(mm2 < 1000 ? 1 : 0)} cm²`;
}

function extent(bodies: readonly Body[], normal: Vector3): number {
  let low = Infinity;
  let high = -Infinity;
  for (const { mesh } of bodies) {
    const [least, most] = rangeAlong(mesh.positions, normal);
    low = Math.min(low, least);
    high = Math.max(high, most);
  }
  return Math.max(0, high - low);
}

/** Area of each cut's section, mm², by its number in preorder: half the caps of both sides. */
function seamAreas(bodies: readonly Body[], cuts: number): Float64Array {
  const areas = new Float64Array(cuts);
  for (const { mesh } of bodies) {
    const { positions: p, indices, tags } = mesh;
    if (!tags) continue;
    for (let t = 0; t < tags.length; t++) {
      if (tags[t] <= 0) continue;
      const a = 3 * indices[3 * t];
      const b = 3 * indices[3 * t + 1];
      const c = 3 * indices[3 * t + 2];
      const ux = p[b] - p[a];
      const uy = p[b + 1] - p[a + 1];
      const uz = p[b + 2] - p[a + 2];
      const vx = p[c] - p[a];
      const vy = p[c + 1] - p[a + 1];
      const vz = p[c + 2] - p[a + 2];
      areas[tags[t] - 1] += Math.hypot(uy * vz - uz * vy, uz * vx - ux * vz, ux * vy - uy * vx) / 4;
    }
  }
  return areas;
}
