import { boundingBox } from '../../../shared/geometry/mesh/measure.js';

/** Nodes on a cubic grid around a model; node (x, y, z) has the number x + y·step[1] + z·step[2]. */
export interface SampleGrid {
  readonly origin: readonly [number, number, number];
  /** Side of a cell, in the model's unit. */
  readonly spacing: number;
  /** Nodes along each axis. */
  readonly nodes: readonly [number, number, number];
  readonly step: readonly [number, number, number];
}

/** Cells kept free around the model; the outermost nodes always lie outside of the surface. */
const margin = 3;
/** Offsets in cells that keep faces in round places off the nodes: parts of the golden ratio's powers. */
const offsets = [0.382, 0.236, 0.146];

/** A grid with the given number of cells along the longest side of the points' box. */
export function layGrid(positions: Float64Array, cells: number): SampleGrid {
  const { min, size } = boundingBox(positions);
  const spacing = Math.max(...size) / cells;
  const along = (axis: number) => Math.ceil(size[axis] / spacing + 2 * margin) + 2;
  const nodes = [along(0), along(1), along(2)] as const;
  const from = (axis: number) => min[axis] - (margin + offsets[axis]) * spacing;
  return {
    origin: [from(0), from(1), from(2)],
    spacing,
    nodes,
    step: [1, nodes[0], nodes[0] * nodes[1]],
  };
}
