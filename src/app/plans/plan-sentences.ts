import { type EnvelopeResponse } from '../../../shared/api/envelopes.contract.js';
import { type PlanOutput } from '../../../shared/jobs/plan-make.js';
import { type CutTree } from '../../../shared/jobs/recipe.js';
import { writeLengthMm, writeSizeMm } from '../ui/format/quantities';

/** How the number of pieces stands against what is possible at all and against a plain grid. */
export function boundsSentence(pieces: number, bounds: Omit<PlanOutput['bounds'], 'gap'>): string {
  if (pieces === 1) return 'The model fits as it is; there is nothing to cut.';
  const reason = asClause(bounds.reason);
  let least = `no plan can have fewer than ${bounds.pieces}${reason}`;
  if (bounds.pieces >= pieces) least = `no plan can have fewer${reason}`;
  else if (bounds.pieces <= 1) least = `fewer are not ruled out${reason}`;
  return `${pieces} pieces; ${least}; the best axis grid makes ${bounds.gridPieces}.`;
}

/** A reason as the end of a sentence: ", because the solid …". */
function asClause(reason: string): string {
  const trimmed = reason.trim().replace(/[.;]+$/, '');
  if (trimmed === '') return '';
  const startsLower = /^[A-Z][a-z' ]/.test(trimmed)
    ? trimmed.charAt(0).toLowerCase() + trimmed.slice(1)
    : trimmed;
  return startsLower.startsWith('because') ? `, ${startsLower}` : `, because ${startsLower}`;
}

/** A cut with its number: from the root, above before below, from 1. */
export interface NumberedCut {
  readonly cut: number;
  readonly reason: string;
  /** The plane in words. */
  readonly where: string;
}

/** Every cut of a tree in the order in which it is made. */
export function listCuts(tree: CutTree): NumberedCut[] {
  const cuts: NumberedCut[] = [];
  const visit = (node: CutTree): void => {
    if (node.kind === 'leaf') return;
    const where = planeInWords(node.plane.normal, node.plane.offset);
    cuts.push({ cut: cuts.length + 1, reason: node.reason, where });
    visit(node.above);
    visit(node.below);
  };
  visit(tree);
  return cuts;
}

/** Normals this near to an axis are called by it. */
const AXIS_COSINE = 1 - 1e-9;

function planeInWords(normal: readonly number[], offsetMm: number): string {
  const axis = normal.findIndex((part) => Math.abs(part) >= AXIS_COSINE);
  if (axis >= 0) {
    const place = writeLengthMm(offsetMm * Math.sign(normal[axis]!));
    return `across ${'xyz'[axis]} at ${place}`;
  }
  const direction = normal.map((part) => part.toFixed(2)).join(', ');
  return `tilted, normal (${direction}), ${writeLengthMm(offsetMm)} from the origin`;
}

/** An envelope as it stands in a title block. */
export function envelopeInWords(envelope: EnvelopeResponse): string {
  const size =
    envelope.shape === 'round'
      ? `⌀ ${writeSizeMm([envelope.diameterMm, envelope.heightMm])}`
      : writeSizeMm([envelope.widthMm, envelope.depthMm, envelope.heightMm]);
  const margin = envelope.marginMm > 0 ? `, margin ${writeLengthMm(envelope.marginMm)}` : '';
  return `${envelope.name}: ${size}${margin}`;
}

/** How a length in the model's file became millimetres. */
export function scaleInWords(millimetresPerUnit: number): string {
  if (millimetresPerUnit === 1) return '1 : 1, file in mm';
  if (Math.abs(millimetresPerUnit - 25.4) < 1e-9) return '1 : 1, file in inches';
  return `1 file unit = ${Number(millimetresPerUnit.toPrecision(5))} mm`;
}
