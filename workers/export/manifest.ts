import { type PlanOutput } from '../../shared/jobs/plan-make.js';

/** Marks a manifest of ours; the command line replaces a folder only when it finds this in it. */
export const MANIFEST_KIND = 'seamwright-pieces';

export interface ManifestModel {
  name: string;
  triangles: number;
  volumeMm3: number;
  sizeMm: readonly [number, number, number];
  /** Factor by which the written pieces are larger than the model, for shrinkage; 1: none. */
  enlargement: number;
}

/**
 * Everything needed to understand the files beside it, as JSON with a final newline. No times and no
 * machine's paths: the same input and seed give the same bytes.
 */
export function manifestJson(
  model: ManifestModel,
  plan: Omit<PlanOutput, 'files' | 'timingsMs'>,
): string {
  const { recipe } = plan;
  const manifest = {
    kind: MANIFEST_KIND,
    version: 1,
    units: { length: 'mm', area: 'mm2', volume: 'mm3' },
    frame: 'right-handed, z up',
    model: {
      name: model.name,
      triangles: model.triangles,
      volumeMm3: model.volumeMm3,
      sizeMm: model.sizeMm,
      millimetresPerFileUnit: recipe.millimetresPerUnit,
    },
    piecesEnlargedBy: model.enlargement,
    buildVolume: recipe.space,
    recipe,
    pieces: plan.pieces,
    seams: plan.seams,
    parts: plan.parts,
    assembly: plan.assembly,
    totals: plan.totals,
    bounds: plan.bounds,
    proof: plan.proof,
    notes: {
      placement:
        'Rows of a 3x4 matrix from the assembled model to the bed: bedPoint = R * modelPoint + t. Where pieces are enlarged for shrinkage, modelPoint is enlarged first.',
      recipe:
        'A tree of planar cuts in the scaled model: points with normal . p >= offset are above.',
      seams: 'Cuts are counted from the root of the tree, above before below, from 1.',
    },
  };
  return JSON.stringify(manifest, null, 2) + '\n';
}
