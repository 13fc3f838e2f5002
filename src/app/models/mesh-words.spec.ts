import {
  changeInWords,
  changeRows,
  faultsInWords,
  genusInWords,
  meshInWords,
  proxyInWords,
} from './mesh-words';
import { makeReport, makeSurface } from './testing/model-fixtures';

const writers = {
  size: (size: readonly number[]) => size.join(' × '),
  area: (area: number) => `${area} mm²`,
  volume: (volume: number) => `${volume} mm³`,
};

describe('meshInWords', () => {
  it('says what a sound file is', () => {
    expect(meshInWords(makeReport())).toBe(
      'A binary STL of 684\u00a0bytes with 12 facets. It holds one closed solid.',
    );
  });

  it('names the format, its parts and its unit, hollows and mending', () => {
    const report = makeReport({
      format: '3mf',
      fileUnit: { name: 'inch', millimetres: 25.4 },
      parts: [
        { name: 'a', facets: 6, isTaken: true },
        { name: 'b', facets: 6, isTaken: false },
      ],
      shells: 3,
      cavities: 1,
      mending: [{ kind: 'weld', count: 2, sentence: '2 vertices were joined.' }],
    });
    expect(meshInWords(report)).toContain(
      'A 3MF file of 684\u00a0bytes with 12 facets in 2 parts, unit inch.',
    );
    expect(meshInWords(report)).toContain(
      'Mended, it holds 2 closed solids with one hollow inside.',
    );
  });

  it('says that an open surface has no inside', () => {
    expect(meshInWords(makeReport({ closed: false }))).toContain('no inside that could be cut');
  });
});

describe('faultsInWords', () => {
  it('lists nothing when the file was in order', () => {
    expect(faultsInWords(makeReport())).toEqual([]);
  });

  it('counts what was wrong as it came, not as it is now', () => {
    const asRead = makeSurface({ openEdges: 1212, misorientedEdges: 1, closed: false });
    expect(faultsInWords(makeReport({ asRead, holesFound: 3 }))).toEqual([
      '3 holes in the surface.',
      '1\u00a0212 edges with a facet on one side only.',
      'One edge whose two facets disagree on what is outside.',
    ]);
  });
});

describe('the comparison of before and after', () => {
  it('writes the change in per cent', () => {
    const report = makeReport({
      asRead: makeSurface({ volume: 10_000, size: [10, 20, 41] }),
      volume: 9_950,
      triangles: 14,
    });
    const rows = changeRows(report, writers);
    expect(rows.map((row) => [row.name, row.change])).toEqual([
      ['Triangles', '+16.67 %'],
      ['Shells', 'same'],
      ['Surface', 'same'],
      ['Volume', '−0.50 %'],
      ['Size', 'up to 2.44 %'],
    ]);
    expect(rows[3]).toMatchObject({ before: '10000 mm³', after: '9950 mm³' });
  });

  it('gives an open surface no volume', () => {
    const rows = changeRows(makeReport({ closed: false, volume: 0 }), writers);
    expect(rows.find((row) => row.name === 'Volume')).toMatchObject({ after: '–', change: '' });
  });

  it('says when a change is too small to show', () => {
    expect(changeInWords(100, 100.001)).toBe('under 0.01 %');
    expect(changeInWords(0, 5)).toBe('');
  });
});

describe('other measures in words', () => {
  it('explains handles by what they look like', () => {
    expect(genusInWords(0)).toMatch(/^none/);
    expect(genusInWords(1)).toBe('1 opening right through it');
    expect(genusInWords(81)).toBe('81 openings right through it');
  });

  it('says how near the picture is, when it is not the model itself', () => {
    expect(proxyInWords(makeReport(), 1)).toBe('');
    const deviation = { mean: 0.01, p95: 0.05, max: 0.1234, samples: 8000 };
    const report = makeReport({ triangles: 1_000_000, proxy: { triangles: 60_000, deviation } });
    expect(proxyInWords(report, 2)).toBe(
      'The picture shows 60\u00a0000 of 1\u00a0000\u00a0000 triangles; measured, it is at most 0.25 mm off.',
    );
  });
});
