import { type PlanOutput } from '../../../shared/jobs/plan-make.js';
import { type ScenePiece, type SceneSeam, type ViewParts } from '../viewer/scene/view-parts';

/** A plan's picture file and its result put together: what the viewer draws. */
export interface PlanPicture {
  readonly pieces: readonly ScenePiece[];
  readonly seams: readonly SceneSeam[];
}

/**
 * Gives every piece of the parts list its surface (`P01` …) and every seam its outline (`seam-1` …).
 * A piece without a surface is left out of the picture; the list still has it.
 */
export function pictureOf(
  result: Pick<PlanOutput, 'pieces' | 'seams'>,
  parts: ViewParts,
): PlanPicture {
  const surfaces = new Map(parts.surfaces.map((surface) => [surface.name, surface]));
  const lines = new Map(parts.lines.map((line) => [line.name, line]));
  return {
    pieces: result.pieces.flatMap((piece): ScenePiece[] => {
      const surface = surfaces.get(piece.name);
      if (!surface) return [];
      const { item, name, centreMm, placement } = piece;
      const support = lines.get(`support-${name}`)?.positions;
      return [{ item, name, surface, centreMm, placement, ...(support && { support }) }];
    }),
    seams: result.seams.map(({ between }, index) => ({
      between,
      positions: lines.get(`seam-${index + 1}`)?.positions ?? new Float32Array(0),
    })),
  };
}
