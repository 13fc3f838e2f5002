import { describe, expect, it } from 'vitest';
import { weightsOf } from '../objectives.js';
import { usualWishes } from '../../../shared/jobs/plan-wishes.js';
import { type MeasuredPlan } from '../choose-plan.js';
import { bestPlan, dominates, sortOffers } from './pick-offers.js';

const plan = (pieces: number, supportMm3: number, visibleSeamMm: number, weakestSeamKpa: number) =>
  ({
    figures: {
      objectives: { pieces, supportMm3, visibleSeamMm, weakestSeamKpa },
      cuts: [{ bendingKpa: weakestSeamKpa }],
      bodies: [],
    },
  }) as unknown as MeasuredPlan;

describe('dominates', () => {
  it('needs one thing better by over a hundredth and nothing worse by more', () => {
    expect(dominates([5, 100, 100, 1], [6, 100, 100, 1])).toBe(true);
    expect(dominates([5, 100.5, 100, 1], [6, 100, 100, 1])).toBe(true);
    expect(dominates([5, 110, 100, 1], [6, 100, 100, 1])).toBe(false);
    expect(dominates([5, 100, 100, 1], [5, 100.5, 100, 1])).toBe(false);
  });
});

describe('sortOffers', () => {
  const few = plan(4, 9e5, 900, 80);
  const clean = plan(7, 1e3, 1500, 60);
  const sturdy = plan(6, 5e5, 1200, 5);
  const worse = plan(7, 9e5, 1600, 90);
  const middle = plan(5, 6e5, 1000, 70);

  it('leaves out what another plan beats in everything, and labels the rest', () => {
    const offers = sortOffers([worse, clean, few, middle, sturdy], middle);
    expect(offers.map(({ plan: one }) => one)).toEqual([few, middle, sturdy, clean]);
    expect(offers.map(({ bestAt }) => bestAt)).toEqual([
      ['fewest pieces', 'least seam in sight'],
      ['nearest to what was asked'],
      ['sturdiest seams'],
      ['least support'],
    ]);
  });

  it('keeps the chosen plan even when another one beats it', () => {
    expect(sortOffers([few, worse], worse).map(({ plan: one }) => one)).toContain(worse);
  });
});

describe('bestPlan', () => {
  const few = plan(6, 12e5, 900, 10);
  const clean = plan(7, 0, 900, 10);
  it('weighs a piece against support as the person does', () => {
    const weights = (fewPieces: number, littleSupport: number) =>
      weightsOf({ ...usualWishes.preferences, fewPieces, littleSupport }, 12);
    expect(bestPlan([few, clean], weights(1, 1))).toBe(few);
    expect(bestPlan([few, clean], weights(0.5, 1))).toBe(clean);
    expect(bestPlan([few, clean], weights(0.8, 0.05))).toBe(few);
  });
});
