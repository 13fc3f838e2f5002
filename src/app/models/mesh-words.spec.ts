import { meshCounts, meshInWords, nextSteps } from './mesh-words';
import { makeReport } from './testing/model-fixtures';

const plain = (words: string) => words.replaceAll('\u00a0', ' ');

describe('meshInWords', () => {
  it('tells what a good file holds', () => {
    expect(plain(meshInWords(makeReport()))).toBe(
      'A binary STL of 684 bytes with 12 facets. It holds one closed solid.',
    );
  });

  it('counts hollows apart from solids and mentions a file that was turned', () => {
    const report = makeReport({
      format: 'stl-ascii',
      shells: 4,
      cavities: 1,
      turnedOutward: true,
    });
    expect(plain(meshInWords(report))).toBe(
      'An STL written as text of 684 bytes with 12 facets. It holds 3 closed solids with one hollow inside. The file came inside out; it was turned.',
    );
  });

  it('does not call an open surface a solid', () => {
    const words = meshInWords(makeReport({ closed: false, openEdges: 4, shells: 2 }));
    expect(words).toContain('not closed');
    expect(words).not.toContain('closed solid');
  });
});

describe('meshCounts', () => {
  it('marks exactly the counts that keep a model from being planned', () => {
    const bad = (report: Parameters<typeof makeReport>[0]) =>
      meshCounts(makeReport(report))
        .filter((row) => row.isBad)
        .map((row) => row.name);
    expect(bad({ degenerateDropped: 7, duplicateFacets: 2, shells: 3 })).toEqual([]);
    expect(bad({ openEdges: 1, nonManifoldEdges: 1, misorientedEdges: 1 })).toHaveLength(3);
  });
});

describe('nextSteps', () => {
  it('always ends with the way on, and says only what the counts call for', () => {
    expect(nextSteps(makeReport())).toHaveLength(1);
    expect(nextSteps(makeReport({ openEdges: 3 }))[0]).toContain('holes');
    const steps = nextSteps(makeReport({ openEdges: 1, nonManifoldEdges: 1, misorientedEdges: 1 }));
    expect(steps).toHaveLength(4);
    expect(steps[3]).toContain('upload it');
  });
});
