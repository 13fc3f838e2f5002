import { type BuildSpace } from '../../shared/geometry/fitting/build-space.js';
import { UsageError } from './usage-error.js';

const LONGEST_MM = 10_000;
const LARGEST_MARGIN_MM = 1_000;
const NUMBER = '([+-]?[0-9]+(?:[.][0-9]+)?)';
const RECTANGULAR = new RegExp(`^${NUMBER}[x×]${NUMBER}[x×]${NUMBER}$`, 'i');
const ROUND = new RegExp(`^round:${NUMBER}[x×]${NUMBER}$`, 'i');

const MOST_ENVELOPES = 8;

/** One or several envelopes with `+` between them; see parseEnvelope. */
export function parseEnvelopes(text: string, marginText: string): BuildSpace[] {
  const texts = text.split('+');
  if (texts.length > MOST_ENVELOPES)
    throw new UsageError(`at most ${MOST_ENVELOPES} envelopes can be given at once`);
  return texts.map((one) => parseEnvelope(one, marginText));
}

/**
 * The build space an envelope in words gives, margin taken off every side of the bed (not off the
 * height). `220x220x250` is width, depth and height; `round:300x400` is diameter and height; mm.
 * Throws a UsageError with one sentence on anything else.
 */
export function parseEnvelope(text: string, marginText: string): BuildSpace {
  const marginMm = parseMargin(marginText);
  const rectangular = RECTANGULAR.exec(text.trim());
  if (rectangular) {
    const [widthMm, depthMm, heightMm] = sides(text, ['width', 'depth', 'height'], rectangular);
    leaveRoom(Math.min(widthMm, depthMm), marginMm, `a bed of ${widthMm} × ${depthMm} mm`);
    const taken = 2 * marginMm;
    return {
      shape: 'rectangular',
      widthMm: widthMm - taken,
      depthMm: depthMm - taken,
      heightMm,
    };
  }
  const round = ROUND.exec(text.trim());
  if (round) {
    const [diameterMm, heightMm] = sides(text, ['diameter', 'height'], round);
    leaveRoom(diameterMm, marginMm, `a round bed of ${diameterMm} mm`);
    return { shape: 'round', diameterMm: diameterMm - 2 * marginMm, heightMm };
  }
  throw new UsageError(
    `the envelope “${text}” is not of the form 220x220x250 (width, depth, height in mm) or round:300x400 (diameter, height)`,
  );
}

function sides(text: string, names: readonly string[], match: RegExpExecArray): number[] {
  return names.map((name, index) => {
    const value = Number(match[index + 1]);
    if (value > 0 && value <= LONGEST_MM) return value;
    throw new UsageError(
      `the envelope “${text}” has a ${name} of ${value} mm, but it must be more than 0 and at most ${LONGEST_MM} mm`,
    );
  });
}

function parseMargin(text: string): number {
  const value = /^[+-]?\d+(\.\d+)?$/.test(text.trim()) ? Number(text) : NaN;
  if (value >= 0 && value <= LARGEST_MARGIN_MM) return value;
  throw new UsageError(
    `the margin “${text}” is not a number of millimetres from 0 to ${LARGEST_MARGIN_MM}`,
  );
}

function leaveRoom(narrowestMm: number, marginMm: number, bed: string): void {
  if (narrowestMm > 2 * marginMm) return;
  throw new UsageError(`a margin of ${marginMm} mm on every side leaves no room on ${bed}`);
}
