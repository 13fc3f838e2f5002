/** Closed chains of links: loop n is nodes[start[n]] .. < nodes[start[n + 1]], the last joins the first. */
export interface Loops {
  readonly count: number;
  readonly start: Int32Array;
  readonly nodes: Int32Array;
}

/**
 * Chains directed links into loops by following next pointers. Where several links leave one node
 * (surfaces that touch in a point), an arriving link goes on with the first leaving one clockwise,
 * so that every loop keeps its solid on its left and no two loops cross.
 * @param from, to node numbers of each link; only the first `count` are read
 * @param xy flat coordinates of the nodes seen from the side where solid on the left means
 *   counter-clockwise, any unit
 * Deterministic: a loop starts at its lowest link, loops are ordered by it. Links that lead nowhere
 * (the mesh was open) and loops of fewer than three links are left out. O(links), plus sorting at
 * shared nodes.
 */
export function chainLoops(
  from: Int32Array,
  to: Int32Array,
  count: number,
  xy: Float64Array,
): Loops {
  const next = nextLinks(from, to, count, xy);
  const done = new Uint8Array(count);
  const nodes = new Int32Array(count);
  const start = [0];
  let filled = 0;
  for (let first = 0; first < count; first++) {
    if (done[first] === 1) continue;
    const begin = filled;
    let link = first;
    while (link >= 0 && done[link] === 0) {
      done[link] = 1;
      nodes[filled++] = from[link];
      link = next[link];
    }
    if (link === first && filled - begin >= 3) start.push(filled);
    else filled = begin;
  }
  return { count: start.length - 1, start: Int32Array.from(start), nodes };
}

function nextLinks(from: Int32Array, to: Int32Array, count: number, xy: Float64Array): Int32Array {
  /** Link that leaves a node; MANY where several do. */
  const leaving = new Int32Array(xy.length / 2).fill(NONE);
  let isShared = false;
  for (let link = 0; link < count; link++) {
    const node = from[link];
    if (leaving[node] === NONE) leaving[node] = link;
    else {
      leaving[node] = MANY;
      isShared = true;
    }
  }
  const next = new Int32Array(count);
  for (let link = 0; link < count; link++) next[link] = leaving[to[link]];
  if (isShared) pairAtSharedNodes(from, to, count, xy, leaving, next);
  return next;
}

const NONE = -1;
const MANY = -2;

interface Spoke {
  readonly link: number;
  readonly angle: number;
}

function pairAtSharedNodes(
  from: Int32Array,
  to: Int32Array,
  count: number,
  xy: Float64Array,
  leaving: Int32Array,
  next: Int32Array,
): void {
  const spokesOf = new Map<number, { arriving: Spoke[]; leaving: Spoke[] }>();
  const at = (node: number) => {
    let spokes = spokesOf.get(node);
    if (spokes === undefined) spokesOf.set(node, (spokes = { arriving: [], leaving: [] }));
    return spokes;
  };
  const angle = (node: number, other: number) =>
    Math.atan2(xy[2 * other + 1] - xy[2 * node + 1], xy[2 * other] - xy[2 * node]);
  for (let link = 0; link < count; link++) {
    const a = from[link];
    const b = to[link];
    if (leaving[a] === MANY) at(a).leaving.push({ link, angle: angle(a, b) });
    if (leaving[b] === MANY) at(b).arriving.push({ link, angle: angle(b, a) });
  }
  for (const spokes of spokesOf.values()) {
    const free = [...spokes.leaving];
    for (const { link, angle: theta } of spokes.arriving) {
      let best = -1;
      let bestTurn = Infinity;
      for (let i = 0; i < free.length; i++) {
        const turn = clockwiseTurn(theta, free[i].angle);
        if (turn < bestTurn) {
          bestTurn = turn;
          best = i;
        }
      }
      next[link] = best < 0 ? NONE : free[best].link;
      if (best >= 0) free.splice(best, 1);
    }
  }
}

/** Clockwise angle from one direction to another, in (0, 2π]. */
function clockwiseTurn(from: number, to: number): number {
  const turn = from - to;
  return turn > 0 ? turn : turn + 2 * Math.PI;
}
