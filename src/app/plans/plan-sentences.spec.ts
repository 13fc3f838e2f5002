import { boundsSentence, envelopeInWords, listCuts, scaleInWords } from './plan-sentences';
import { sampleEnvelope, samplePlan } from './testing/sample-plan';

describe('boundsSentence', () => {
  const bounds = { pieces: 4, reason: 'The solid needs 3.2 envelopes.', gridPieces: 12 };

  it('says how many pieces there are, how few there could be and why, and what a grid makes', () => {
    expect(boundsSentence(7, bounds)).toBe(
      '7 pieces; no plan can have fewer than 4, because the solid needs 3.2 envelopes; the best axis grid makes 12.',
    );
  });

  it('says it when no plan can be better', () => {
    expect(boundsSentence(4, bounds)).toContain('4 pieces; no plan can have fewer, because');
  });

  it('does not say because twice and keeps names in capitals', () => {
    expect(boundsSentence(7, { ...bounds, reason: 'because it is long.' })).toContain(
      'fewer than 4, because it is long;',
    );
    expect(boundsSentence(7, { ...bounds, reason: 'STL facets say so' })).toContain('because STL');
    expect(boundsSentence(7, { ...bounds, reason: '' })).toContain('fewer than 4; the best');
  });

  it('claims no bound where none was found', () => {
    const found = { ...bounds, pieces: 1, reason: 'Nothing asks for more than one piece.' };
    expect(boundsSentence(3, found)).toBe(
      '3 pieces; fewer are not ruled out, because nothing asks for more than one piece; the best axis grid makes 12.',
    );
  });

  it('says that there is nothing to cut', () => {
    expect(boundsSentence(1, { ...bounds, pieces: 1 })).toBe(
      'The model fits as it is; there is nothing to cut.',
    );
  });
});

describe('listCuts', () => {
  it('numbers the cuts from the root, above before below, with place and reason', () => {
    const cuts = listCuts(samplePlan().result!.recipe.tree);
    expect(cuts.map(({ cut, reason }) => [cut, reason])).toEqual([
      [1, 'The first reason.'],
      [2, 'The second reason.'],
    ]);
    expect(cuts[0]!.where).toMatch(/^across z at 150\.0.mm$/);
    expect(cuts[1]!.where).toContain('tilted, normal (0.00, 0.60, 0.80)');
  });

  it('gives a plane with a normal against its axis its true place', () => {
    const leaf = { kind: 'leaf' } as const;
    const plane = { normal: [-1, 0, 0] as [number, number, number], offset: -40 };
    const [cut] = listCuts({ kind: 'cut', plane, reason: '', above: leaf, below: leaf });
    expect(cut!.where).toMatch(/^across x at 40\.0/);
  });

  it('is empty for a model that is not cut', () => {
    expect(listCuts({ kind: 'leaf' })).toEqual([]);
  });
});

describe('title block words', () => {
  it('writes an envelope with its margin only when it has one', () => {
    expect(envelopeInWords(sampleEnvelope)).toMatch(/^Bench cube: 220\.0 × 220\.0 × 250\.0.mm$/);
    expect(envelopeInWords({ ...sampleEnvelope, marginMm: 5 })).toMatch(/margin 5\.0.mm$/);
  });

  it('writes a round envelope by its diameter', () => {
    const { name, id, updatedAt, heightMm, marginMm, nozzleMm, layerHeightMm } = sampleEnvelope;
    const common = { name, id, updatedAt, heightMm, marginMm, nozzleMm, layerHeightMm };
    const words = envelopeInWords({ ...common, shape: 'round', diameterMm: 300 });
    expect(words).toMatch(/⌀ 300\.0 × 250\.0.mm/);
  });

  it('writes the scale of the model', () => {
    expect(scaleInWords(1)).toBe('1 : 1, file in mm');
    expect(scaleInWords(25.4)).toBe('1 : 1, file in inches');
    expect(scaleInWords(1.23456789)).toBe('1 file unit = 1.2346 mm');
  });
});
