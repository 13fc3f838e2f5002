import { type TriangleMesh } from '../mesh/triangle-mesh.js';

/** The part of a body's surface that one cut left. */
export interface Cap {
  /** Number of the cut, from 1. */
  cut: number;
  /** Triangles of the cap, as indices into the mesh's triangles. */
  triangles: number[];
  /** Closed loops of vertex numbers round the cap, the cap on their left seen from outside. */
  loops: number[][];
}

/**
 * The caps of a body, by rising number of the cut. A cap's loops are the edges that only one of its
 * triangles uses; where loops touch in a vertex they may be chained either way, which bounds the same
 * region under the even-odd rule. Edges that do not close a loop (an open mesh) are left out.
 * @param only the number of one cut; absent: all
 */
export function capsOf(mesh: TriangleMesh, only?: number): Cap[] {
  const { tags } = mesh;
  if (!tags) return [];
  const byCut = new Map<number, number[]>();
  for (let triangle = 0; triangle < tags.length; triangle++) {
    const cut = tags[triangle];
    if (cut <= 0 || (only !== undefined && cut !== only)) continue;
    const triangles = byCut.get(cut);
    if (triangles) triangles.push(triangle);
    else byCut.set(cut, [triangle]);
  }
  return [...byCut.entries()]
    .sort(([a], [b]) => a - b)
    .map(([cut, triangles]) => ({ cut, triangles, loops: loopsAround(mesh, triangles) }));
}

function loopsAround({ indices, positions }: TriangleMesh, triangles: readonly number[]) {
  const vertices = positions.length / 3;
  const edges = new Set<number>();
  for (const triangle of triangles)
    for (let k = 0; k < 3; k++) {
      const from = indices[3 * triangle + k];
      const to = indices[3 * triangle + ((k + 1) % 3)];
      // An edge inside the cap is used both ways and cancels out.
      if (!edges.delete(to * vertices + from)) edges.add(from * vertices + to);
    }
  const nexts = new Map<number, number[]>();
  for (const edge of edges) {
    const from = Math.floor(edge / vertices);
    const to = edge % vertices;
    const list = nexts.get(from);
    if (list) list.push(to);
    else nexts.set(from, [to]);
  }
  const loops: number[][] = [];
  for (const start of nexts.keys())
    for (;;) {
      const loop = takeLoop(nexts, start);
      if (!loop) break;
      loops.push(loop);
    }
  return loops;
}

/** Walks unused edges from a vertex back to it, using them up; undefined when there are none. */
function takeLoop(nexts: Map<number, number[]>, start: number): number[] | undefined {
  const loop: number[] = [];
  let vertex = start;
  for (;;) {
    const next = nexts.get(vertex)?.pop();
    if (next === undefined) return undefined;
    loop.push(vertex);
    if (next === start) return loop;
    vertex = next;
  }
}
