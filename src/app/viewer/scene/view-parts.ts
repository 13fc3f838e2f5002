/** A triangle surface as the picture file holds it. */
export interface SurfacePart {
  readonly name: string;
  /** Flat xyz, length 3 × vertex count. */
  readonly positions: Float32Array;
  /** Vertex indices, length 3 × triangle count, counter-clockwise seen from outside. */
  readonly indices: Uint32Array;
  /** Wall thickness, one a vertex, in the unit of the positions; 0 where it is not known. */
  readonly walls?: Float32Array;
}

/** A set of line segments, such as the outline of a seam. */
export interface LinePart {
  readonly name: string;
  /** Flat xyz, two points a segment. */
  readonly positions: Float32Array;
}

/** Everything a picture file holds, in one frame, z up. */
export interface ViewParts {
  readonly surfaces: readonly SurfacePart[];
  readonly lines: readonly LinePart[];
}

export type Triple = readonly [number, number, number];

/** A piece as the scene needs it: its surface in the assembled model and how it lies on the bed. */
export interface ScenePiece {
  readonly item: number;
  readonly name: string;
  readonly surface: SurfacePart;
  /** Centre of its box in the assembled model, mm. */
  readonly centreMm: Triple;
  /** Assembled model to bed: 12 numbers, rows of a 3×4 matrix. Null when it is never laid down. */
  readonly placement: readonly number[] | null;
  /** Columns of support under it as it lies: flat xyz, foot and head, in the assembled model. */
  readonly support?: Float32Array;
}

/** Where two pieces meet; its outline travels with both. */
export interface SceneSeam {
  readonly between: readonly [string, string];
  /** Flat xyz, two points a segment, in the assembled model. */
  readonly positions: Float32Array;
}

/** The triangles of a surface. */
export function triangleTotal(surface: SurfacePart): number {
  return surface.indices.length / 3;
}
