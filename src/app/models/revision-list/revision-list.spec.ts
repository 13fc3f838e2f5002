import { TestBed } from '@angular/core/testing';
import { type RevisionSummary } from '../../../../shared/api/models.contract.js';
import { idOf } from '../testing/model-fixtures';
import { RevisionList } from './revision-list';
import { comparisonInWords } from './revision-words';

const revision = (number: number, change: Partial<RevisionSummary> = {}): RevisionSummary => ({
  id: idOf(`r${number}`),
  number,
  fileName: `heron-${number}.stl`,
  fileBytes: 684,
  createdAt: '2031-03-04T13:05:00.000Z',
  createdBy: 'Ada Larch',
  triangles: 1000,
  sizeMm: [100, 200, 300],
  volumeMm3: 50_000,
  planCount: 0,
  ...change,
});

describe('the comparison of two revisions', () => {
  it('says what changed of size, volume and triangles', () => {
    const now = revision(2, { sizeMm: [100, 201.5, 299], volumeMm3: 51_000, triangles: 900 });
    expect(comparisonInWords(now, revision(1))).toBe(
      'Against revision 1: size y +1.5 mm, z −1.0 mm, volume +2.00 %, 100 fewer triangles.',
    );
    expect(comparisonInWords(revision(2), revision(1))).toBe(
      'Against revision 1: the same size, volume same, as many triangles.',
    );
  });

  it('waits for the inspection', () => {
    expect(comparisonInWords(revision(2, { sizeMm: null, triangles: null }), revision(1))).toBe('');
  });
});

describe('RevisionList', () => {
  it('lists the newest first with its comparison', async () => {
    const fixture = TestBed.createComponent(RevisionList);
    fixture.componentRef.setInput('revisions', [
      revision(2, { triangles: null, sizeMm: null, volumeMm3: null }),
      revision(1, { planCount: 3 }),
    ]);
    await fixture.whenStable();
    const host = fixture.nativeElement as HTMLElement;
    const rows = [...host.querySelectorAll('tbody tr')].map((row) =>
      [...row.children].map((cell) => cell.textContent!.trim()),
    );
    expect(rows.map((row) => row[0])).toEqual(['2', '1']);
    expect(rows[0]!.slice(3)).toEqual(['–', '–', '–', '0']);
    expect(rows[1]!.at(-1)).toBe('3');
  });
});
