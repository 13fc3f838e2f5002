import { describe, expect, it } from 'vitest';
import { materialPresets, usualMaterial } from '../../shared/jobs/material-profile.js';
import { addEstimates, estimatePart, glueFor, mixesFor, printedVolume } from './estimate.js';

const middle = ([low, high]: readonly [number, number]) => (low + high) / 2;

describe('printedVolume', () => {
  it('is shell and infill by the handbook formula, and the whole of a thin part', () => {
    // A 100 mm cube: shell 6 × 100² × 1.2 mm, the rest filled to 15 %.
    const cube = { volumeMm3: 1e6, surfaceMm2: 6e4 };
    expect(printedVolume(cube, usualMaterial)).toBeCloseTo(72_000 + 0.15 * 928_000, 6);
    expect(printedVolume({ volumeMm3: 1000, surfaceMm2: 5000 }, usualMaterial)).toBe(1000);
  });
});

describe('estimatePart', () => {
  it.each([
    ['PLA', 2.98],
    ['PETG', 3.06],
    ['ABS', 2.5],
    ['ASA', 2.57],
    ['TPU 95A', 2.91],
    ['PA12', 2.43],
  ])('weighs %s at %f g for a metre of 1.75 mm filament (computed table)', (name, grams) => {
    const material = materialPresets.find((one) => one.name === name)!;
    const part = { volumeMm3: 50_000, surfaceMm2: 1e6, supportMm3: 0 };
    const { massG, filamentM } = estimatePart(part, material);
    expect(massG[1] / filamentM[1]).toBeCloseTo(grams, 1);
    expect(middle(massG)).toBeCloseTo((50_000 * material.densityGPerCm3) / 1000, 9);
  });

  it('counts support by its filling, and gives time and cost as ranges', () => {
    const bare = estimatePart({ volumeMm3: 9e4, surfaceMm2: 1e6, supportMm3: 0 }, usualMaterial);
    const held = estimatePart({ volumeMm3: 9e4, surfaceMm2: 1e6, supportMm3: 5e4 }, usualMaterial);
    expect(middle(held.massG) / middle(bare.massG)).toBeCloseTo(1 + (0.2 * 5e4) / 9e4, 9);
    // 90 cm³ at 15 mm³/s × 0.7 less a tenth; at 8 × 0.5 and a tenth more.
    expect(bare.hours[0]).toBeCloseTo((0.9 * 9e4) / 10.5 / 3600, 9);
    expect(bare.hours[1]).toBeCloseTo((1.1 * 9e4) / 4 / 3600, 9);
    expect(bare.cost[0]).toBeCloseTo((bare.massG[0] / 1000) * usualMaterial.pricePerKg, 9);
  });

  it('adds up', () => {
    const one = estimatePart({ volumeMm3: 1e4, surfaceMm2: 4e3, supportMm3: 10 }, usualMaterial);
    expect(addEstimates([one, one, one]).massG[0]).toBeCloseTo(3 * one.massG[0], 9);
    expect(addEstimates([])).toEqual({
      massG: [0, 0],
      filamentM: [0, 0],
      hours: [0, 0],
      cost: [0, 0],
    });
  });
});

describe('glue', () => {
  it('of a 0.1 mm film is 1.0 ml for 100 cm², of 0.2 mm 2.0 ml, with 1.3 to 2 times mixed', () => {
    for (const [filmMm, ml] of [
      [0.1, 1],
      [0.2, 2],
    ] as const) {
      const material = { ...usualMaterial, glue: { ...usualMaterial.glue, filmMm } };
      const [low, high] = glueFor(10_000, material);
      expect(low).toBeCloseTo(1.3 * ml, 9);
      expect(high).toBeCloseTo(2 * ml, 9);
    }
  });

  it('is mixed anew for what cannot be coated within the pot life', () => {
    // 20 cm² a minute for 5 minutes: 100 cm² a mix.
    expect(mixesFor(9_999, usualMaterial)).toBe(1);
    expect(mixesFor(10_001, usualMaterial)).toBe(2);
    expect(mixesFor(0, usualMaterial)).toBe(1);
  });
});
