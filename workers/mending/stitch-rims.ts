import { mateEdges, nextSide, OPEN } from '../../shared/geometry/mesh/edge-mates.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { PointGrid } from './point-grid.js';
import { faultsOf } from './weld-rims.js';

/** A triangle with vertices on several of its sides is split a side a round. */
const mostRounds = 6;

/**
 * Closes T-junctions: where a vertex of an open edge lies on another open edge within the tolerance,
 * that edge is split there, so that both sides have the same vertices. No vertex moves. A round that
 * does not lessen the faults is taken back. @returns the mesh itself when nothing was stitched
 */
export function stitchRims(
  mesh: TriangleMesh,
  tolerance: number,
): { mesh: TriangleMesh; stitched: number } {
  let current = mesh;
  let stitched = 0;
  let faults = faultsOf(mesh.indices);
  for (let round = 0; round < mostRounds && faults > 0; round++) {
    const splits = findSplits(current, tolerance);
    if (splits.size === 0) break;
    const next = { positions: current.positions, indices: splitSides(current.indices, splits) };
    const left = faultsOf(next.indices);
    if (left >= faults) break;
    for (const vertices of splits.values()) stitched += vertices.length;
    faults = left;
    current = next;
  }
  return { mesh: current, stitched };
}

/** For open sides the rim vertices that lie on them, in their order; one side a triangle. */
function findSplits(
  { positions, indices }: TriangleMesh,
  tolerance: number,
): Map<number, number[]> {
  const { mates } = mateEdges(indices);
  const open: number[] = [];
  let sum = 0;
  for (let side = 0; side < mates.length; side++) {
    if (mates[side] !== OPEN) continue;
    open.push(side);
    sum += distance(positions, indices[side], indices[nextSide(side)]);
  }
  const cell = Math.max(sum / Math.max(1, open.length), 2 * tolerance);
  const grid = new PointGrid(positions, cell);
  const rim = new Set(open.flatMap((side) => [indices[side], indices[nextSide(side)]]));
  for (const vertex of rim) grid.add(vertex);
  const splits = new Map<number, number[]>();
  const taken = new Set<number>();
  for (const side of open) {
    const triangle = Math.floor(side / 3);
    if (taken.has(triangle)) continue;
    const on = verticesOn(positions, indices, side, { grid, cell, tolerance });
    if (on.length === 0) continue;
    splits.set(side, on);
    taken.add(triangle);
  }
  return splits;
}

function verticesOn(
  positions: Float64Array,
  indices: Uint32Array,
  side: number,
  near: { grid: PointGrid; cell: number; tolerance: number },
): number[] {
  const from = indices[side];
  const to = indices[nextSide(side)];
  const apex = indices[nextSide(nextSide(side))];
  const [ax, ay, az] = positions.subarray(3 * from, 3 * from + 3);
  const ux = positions[3 * to] - ax;
  const uy = positions[3 * to + 1] - ay;
  const uz = positions[3 * to + 2] - az;
  const length = Math.sqrt(ux * ux + uy * uy + uz * uz);
  const found = new Map<number, number>();
  const consider = (vertex: number) => {
    if (vertex === from || vertex === to || vertex === apex || found.has(vertex)) return;
    const dx = positions[3 * vertex] - ax;
    const dy = positions[3 * vertex + 1] - ay;
    const dz = positions[3 * vertex + 2] - az;
    const along = (dx * ux + dy * uy + dz * uz) / length;
    if (along <= near.tolerance || along >= length - near.tolerance) return;
    const off2 = dx * dx + dy * dy + dz * dz - along * along;
    if (off2 <= near.tolerance * near.tolerance) found.set(vertex, along);
  };
  const steps = Math.ceil(length / near.cell);
  for (let step = 0; step <= steps; step++) {
    const share = step / Math.max(1, steps);
    near.grid.around(ax + share * ux, ay + share * uy, az + share * uz, consider);
  }
  return [...found].sort((a, b) => a[1] - b[1] || a[0] - b[0]).map(([vertex]) => vertex);
}

/** Replaces a triangle whose side a→b is split by a fan from its apex. */
function splitSides(indices: Uint32Array, splits: ReadonlyMap<number, number[]>): Uint32Array {
  const added: number[] = [];
  const result = indices.slice();
  for (const [side, vertices] of splits) {
    const apex = indices[nextSide(nextSide(side))];
    const chain = [indices[side], ...vertices, indices[nextSide(side)]];
    const triangle = 3 * Math.floor(side / 3);
    result.set([chain[0], chain[1], apex], triangle);
    for (let i = 1; i + 1 < chain.length; i++) added.push(chain[i], chain[i + 1], apex);
  }
  const whole = new Uint32Array(result.length + added.length);
  whole.set(result);
  whole.set(added, result.length);
  return whole;
}

function distance(positions: Float64Array, a: number, b: number): number {
  return Math.hypot(
    positions[3 * a] - positions[3 * b],
    positions[3 * a + 1] - positions[3 * b + 1],
    positions[3 * a + 2] - positions[3 * b + 2],
  );
}
