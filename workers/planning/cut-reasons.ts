import { type Body, countCuts, type PlaneTree } from '../../shared/geometry/cutting/apply-tree.js';
import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { spaceInWords } from '../../shared/geometry/fitting/space-measures.js';
import { type Plane, type Vector3 } from '../../shared/geometry/vectors/plane.js';
import { type CutTree } from '../../shared/jobs/recipe.js';
import { leafPath } from './exact-plan.js';
import { type CutFigures } from './judging/exact-figures.js';
import { rangeAlong } from './sweep-tables.js';

export interface ExplainedPlan {
  readonly tree: PlaneTree;
  readonly bodies: readonly Body[];
  /** As really used, in preorder. */
  readonly offsets: readonly number[];
  readonly cuts: readonly CutFigures[];
  readonly spaces: readonly BuildSpace[];
  readonly mirrors: readonly Plane[];
}

/** The recipe's tree: offsets as really used, every cut with a sentence of real numbers. */
export function explainTree(plan: ExplainedPlan): CutTree {
  const { bodies, offsets } = plan;
  const sideOf = (path: string) => bodies.filter((body) => leafPath(body).startsWith(path));
  const explain = (node: PlaneTree, path: string, first: number): CutTree => {
    if (node.kind === 'leaf') return { kind: 'leaf' };
    const { normal } = node.plane;
    const plane: Plane = { normal, offset: offsets[first] };
    const isFree = plan.cuts[first].areaMm2 <= 0;
    const what = whatItDoes(normal, sideOf(`${path}a`), sideOf(`${path}b`), plan.spaces, isFree);
    return {
      kind: 'cut',
      plane: { normal: [normal[0], normal[1], normal[2]], offset: plane.offset },
      reason: reasonOf(node, plane, what, plan.cuts[first], plan.mirrors),
      ...(node.locked && { locked: true }),
      above: explain(node.above, `${path}a`, first + 1),
      below: explain(node.below, `${path}b`, first + 1 + countCuts(node.above)),
    };
  };
  return explain(plan.tree, '', 0);
}

function reasonOf(
  { locked }: PlaneTree & { kind: 'cut' },
  plane: Plane,
  what: string,
  figures: CutFigures,
  mirrors: readonly Plane[],
): string {
  const clauses = [what];
  if (mirrors.some((mirror) => isSamePlane(mirror, plane)))
    clauses.push('it lies in the mirror plane of the model');
  if (figures.areaMm2 > 0) clauses.push(`seam area ${areaInWords(figures.areaMm2)}`);
  if (figures.outlineMm > 0) {
    const inSight = Math.round((100 * figures.sightMm) / figures.outlineMm);
    const follows =
      figures.creaseMm > 0.1 * figures.outlineMm
        ? `, ${mm(figures.creaseMm)} of it along an edge`
        : '';
    clauses.push(
      `${mm(figures.outlineMm)} of line on the surface${follows}, ${inSight} % in sight`,
    );
  }
  const sentence = `${clauses.join('; ')}.`;
  if (!locked) return sentence;
  return `Your own cut, kept where it is: ${sentence[0].toLowerCase()}${sentence.slice(1)}`;
}

function whatItDoes(
  normal: Vector3,
  above: readonly Body[],
  below: readonly Body[],
  spaces: readonly BuildSpace[],
  isFree: boolean,
): string {
  const along = directionInWords(normal);
  const pieces = (count: number) => `${count} ${count === 1 ? 'piece' : 'pieces'}`;
  const [a, b] = [extent(above, normal), extent(below, normal)];
  const space =
    spaces.length === 1 ? spaceInWords(spaces[0]) : `one of the ${spaces.length} envelopes`;
  if (above.length === 0 || below.length === 0)
    return `Meets nothing here: one of its 2 sides along ${along} is empty`;
  if (isFree)
    return `Parts loose bodies along ${along} without cutting any, so that ${pieces(above.length)} above and ${pieces(below.length)} below are planned apart`;
  const whole = mm(extent([...above, ...below], normal));
  if (above.length === 1 && below.length === 1)
    return `Splits ${whole} along ${along} into parts of ${mm(a)} and ${mm(b)} so that both fit ${space}`;
  if (above.length === 1 || below.length === 1) {
    const [taken, left, rest] = above.length === 1 ? [a, b, below] : [b, a, above];
    return `Takes ${mm(taken)} of ${whole} along ${along} off as one piece that fits ${space}; the other ${mm(left)} become ${pieces(rest.length)}`;
  }
  return `Divides ${whole} along ${along} into ${mm(a)} (${pieces(above.length)}) and ${mm(b)} (${pieces(below.length)})`;
}

const mm = (length: number) => `${Number(length.toFixed(length < 10 ? 1 : 0))} mm`;

function isSamePlane(one: Plane, other: Plane): boolean {
  const cosine =
    one.normal[0] * other.normal[0] +
    one.normal[1] * other.normal[1] +
    one.normal[2] * other.normal[2];
  const offset = cosine < 0 ? -other.offset : other.offset;
  return Math.abs(cosine) > 1 - 1e-6 && Math.abs(one.offset - offset) < 0.1;
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
