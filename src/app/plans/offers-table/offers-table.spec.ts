import { TestBed } from '@angular/core/testing';
import { type Offer } from '../../../../shared/jobs/plan-make.js';
import { OffersTable } from './offers-table';

const offer = (pieces: number, bestAt: string[]): Offer => ({
  bestAt,
  objectives: { pieces, supportMm3: 126_000, visibleSeamMm: 4_937, weakestSeamKpa: 19.23 },
  tree: { kind: 'leaf' },
});

async function setUp(mayMake: boolean) {
  const fixture = TestBed.createComponent(OffersTable);
  fixture.componentRef.setInput('offers', [
    offer(10, ['fewest pieces', 'least seam in sight']),
    offer(11, ['nearest to what was asked']),
  ]);
  fixture.componentRef.setInput('chosen', 1);
  fixture.componentRef.setInput('mayMake', mayMake);
  const asked: number[] = [];
  fixture.componentInstance.asked.subscribe((index) => asked.push(index));
  await fixture.whenStable();
  return { page: fixture.nativeElement as HTMLElement, asked };
}

describe('OffersTable', () => {
  it('says what each plan is best at, with its numbers, and which one this is', async () => {
    const { page } = await setUp(true);
    const rows = [...page.querySelectorAll('tbody tr')].map((row) =>
      row.textContent.replaceAll(/[\u00a0\u202f\s]+/g, ' ').trim(),
    );
    expect(rows[0]).toContain('Fewest pieces, least seam in sight');
    expect(rows[0]).toContain('126 cm³');
    expect(rows[0]).toContain('4.94 m');
    expect(rows[0]).toContain('19 kPa');
    expect(rows[1]).toContain('this plan');
  });

  it('lets those who may make another one', async () => {
    const { page, asked } = await setUp(true);
    const buttons = page.querySelectorAll('button');
    expect(buttons).toHaveLength(1);
    expect(buttons[0]!.getAttribute('aria-label')).toBe(
      'Make this one: Fewest pieces, least seam in sight, 10 pieces',
    );
    buttons[0]!.click();
    expect(asked).toEqual([0]);
    expect((await setUp(false)).page.querySelector('button')).toBeNull();
  });
});
