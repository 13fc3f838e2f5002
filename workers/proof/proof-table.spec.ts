import { describe, expect, it } from 'vitest';
import { type WrittenPiece } from './measure-written-piece.js';
import { proofTable } from './proof-table.js';

const sound: WrittenPiece = {
  name: 'P01',
  facets: 12,
  sizeMatches: true,
  finite: true,
  openEdges: 0,
  repeatedEdges: 0,
  collapsedFacets: 0,
  bodies: 1,
  hollows: 0,
  strayHollows: 0,
  volumeMm3: 1000,
  surfaceMm2: 600,
  min: [0, 0, 0],
  max: [220, 100, 50],
  radiusMm: 100,
};
const bed = { shape: 'rectangular', widthMm: 220, depthMm: 220, heightMm: 250 } as const;
const roundBed = { shape: 'round', diameterMm: 200, heightMm: 250 } as const;
const failed = (
  piece: Partial<WrittenPiece>,
  more: Partial<Parameters<typeof proofTable>[0]> = {},
) =>
  proofTable({
    pieces: [sound, { ...sound, name: 'P02', ...piece }],
    spaces: [bed, bed],
    modelVolumeMm3: 2000,
    addedMm3: 0,
    failures: [],
    ...more,
  })
    .filter((row) => !row.passed)
    .map((row) => `${row.check}: ${row.measured}`);

describe('proofTable', () => {
  it('passes sound pieces that fill the bed to its edge', () => {
    expect(failed({})).toEqual([]);
    expect(failed({}, { spaces: [roundBed, roundBed] })).toEqual([]);
  });

  it.each([
    ['a file of the wrong size', { sizeMatches: false }, 'Files are whole: P02 damaged'],
    ['a coordinate that is no number', { finite: false }, 'Files are whole: P02 damaged'],
    ['an open edge', { openEdges: 2, repeatedEdges: 1 }, 'Surfaces are closed: 3 in P02'],
    ['a stray hollow', { strayHollows: 1 }, 'Surfaces face outward: P02 inside out'],
    ['two bodies', { bodies: 2 }, 'One body a piece: P02 has 2'],
    ['a lifted piece', { min: [0, 0, 0.5] }, 'Pieces rest on the bed: P02 is 0.50 mm off'],
  ] as [string, Partial<WrittenPiece>, string][])('names the piece with %s', (_, change, row) => {
    expect(failed(change)).toEqual([row]);
  });

  it('says which piece sticks out and how far, in width, depth, height and on a round bed', () => {
    const over = (max: [number, number, number], min: [number, number, number] = [0, 0, 0]) =>
      failed({ max, min });
    expect(over([220.2, 10, 10])).toEqual([
      'Pieces fit the build volume: P02 over, P02 by 0.20 mm',
    ]);
    expect(over([10, 221, 10])).toHaveLength(1);
    expect(over([10, 10, 250.01])).toHaveLength(1);
    expect(over([10, 10, 10], [-0.001, 0, 0])).toHaveLength(1);
    expect(failed({ radiusMm: 100.01 }, { spaces: [roundBed, roundBed] })).toHaveLength(1);
  });

  it('compares the sum of the volumes with the model to one part in a million', () => {
    expect(failed({ volumeMm3: 1000.001 })).toEqual([]);
    expect(failed({ volumeMm3: 1000.01 })[0]).toMatch(/^Volumes add up.*difference 5\.0e-6$/);
  });

  it('fails when there are no pieces, and gives each unfinished piece a row of its own', () => {
    expect(failed({}, { pieces: [] }).length).toBeGreaterThan(0);
    expect(failed({}, { failures: ['P02 stays open.'] })).toEqual([
      'Finishing of every piece: P02 stays open.',
    ]);
  });

  it('says which pieces have hollows without failing them', () => {
    const rows = proofTable({
      pieces: [{ ...sound, hollows: 2 }],
      spaces: [bed],
      modelVolumeMm3: 1000,
      addedMm3: 0,
      failures: [],
    });
    const row = rows.find((candidate) => candidate.check === 'One body a piece');
    expect(row?.passed).toBe(true);
    expect(row?.measured).toContain('2 closed hollows in P01');
  });
});
