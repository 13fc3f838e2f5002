import { type PlanPart } from '../../shared/jobs/joint-plan.js';
import { type MaterialProfile } from '../../shared/jobs/material-profile.js';
import {
  type AssemblyStep,
  type Piece,
  type PlanTotals,
  type Range,
} from '../../shared/jobs/plan-make.js';
import { type Move } from '../assembling/plan-assembly.js';
import {
  addEstimates,
  addRanges,
  estimatePart,
  glueFor,
  mixesFor,
} from '../estimating/estimate.js';

/** One move of the glue-up with what it takes. */
export function assemblyStep(
  { moved, onto, direction, seams: closed }: Move,
  seams: readonly { readonly areaMm2: number }[],
  pieces: readonly Piece[],
  material: MaterialProfile,
): AssemblyStep {
  const areaMm2 = closed.reduce((sum, k) => sum + seams[k].areaMm2, 0);
  const movedPieces = pieces.filter(({ name }) => moved.includes(name));
  return {
    moved: [...moved],
    onto: [...onto],
    direction: [...direction],
    seams: [...closed],
    glueMl: glueFor(areaMm2, material),
    mixes: mixesFor(areaMm2, material),
    movedMassG: addRanges(movedPieces.map((piece) => finishedMass(piece, material))),
  };
}

/** What the whole plan takes. */
export function totalsOf(
  {
    pieces,
    assembly,
    parts,
  }: {
    pieces: readonly Piece[];
    assembly: readonly AssemblyStep[];
    parts: readonly PlanPart[];
  },
  material: MaterialProfile,
): PlanTotals {
  const printed = parts
    .filter(({ file }) => file !== null)
    .map(({ volumeMm3, count, diameterMm, lengthMm }) =>
      estimatePart(
        {
          volumeMm3: count * volumeMm3,
          // A pin's walls fill it.
          surfaceMm2: count * Math.PI * diameterMm * (lengthMm + diameterMm / 2),
          supportMm3: 0,
        },
        material,
      ),
    );
  const estimates = pieces.flatMap(({ estimate }) => (estimate ? [estimate] : []));
  const glueMl = addRanges(assembly.map((step) => step.glueMl));
  const glueG: Range = [
    (glueMl[0] / material.glue.allowance[0]) * material.glue.densityGPerMl,
    glueMl[1] * material.glue.densityGPerMl,
  ];
  return {
    estimate: addEstimates([...estimates, ...printed]),
    glueMl,
    mixes: assembly.reduce((sum, step) => sum + step.mixes, 0),
    assembledG: addRanges([
      ...pieces.map((piece) => finishedMass(piece, material)),
      ...printed.map((one) => one.massG),
      glueG,
    ]),
  };
}

/** Mass of a piece with its support taken off. */
function finishedMass({ estimate, supportMm3 }: Piece, material: MaterialProfile): Range {
  if (!estimate) return [0, 0];
  const supportG =
    (supportMm3 * (material.supportFillPercent / 100) * material.densityGPerCm3) / 1000;
  return [
    Math.max(0, estimate.massG[0] - 0.9 * supportG),
    Math.max(0, estimate.massG[1] - 1.1 * supportG),
  ];
}
