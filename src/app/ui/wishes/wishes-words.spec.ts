import { planWishes, usualWishes } from '../../../../shared/jobs/plan-wishes.js';
import { presetOf, wishesInWords } from './wishes-words';

describe('wishesInWords', () => {
  it('names the preset, and what else was asked', () => {
    expect(wishesInWords(usualWishes)).toBe('A bit of everything');
    const asked = planWishes.parse({
      preferences: { fewPieces: 0.3, littleSupport: 0.3, hiddenSeams: 0.3, sturdySeams: 0.3 },
      showDirections: [
        [0, -1, 0],
        [0.6, 0.8, 0],
      ],
      keepWhole: [{ shape: 'sphere', name: 'boss', centre: [0, 0, 0], radiusMm: 5 }],
      lockedCuts: [
        { normal: [0, 0, 1], offset: 1 },
        { normal: [0, 0, 1], offset: 9 },
      ],
    });
    expect(wishesInWords(asked)).toBe(
      'Own mixture; seen from front, a direction of its own; 1 zone kept whole; 2 own cuts',
    );
  });

  it('knows a preset by its values', () => {
    expect(presetOf({ fewPieces: 1, littleSupport: 0.1, hiddenSeams: 0.1, sturdySeams: 0.1 })).toBe(
      'quick',
    );
    expect(presetOf({ fewPieces: 1, littleSupport: 0.2, hiddenSeams: 0.1, sturdySeams: 0.1 })).toBe(
      null,
    );
  });
});
