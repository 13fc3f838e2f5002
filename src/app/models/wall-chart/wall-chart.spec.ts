import { TestBed } from '@angular/core/testing';
import { WallChart } from './wall-chart';

describe('WallChart', () => {
  it('shows the numbers in millimetres and a bar for every range, also in words', async () => {
    const fixture = TestBed.createComponent(WallChart);
    fixture.componentRef.setInput('wall', {
      samples: 8000,
      min: 1.25,
      p5: 1.4,
      median: 1.5,
      max: 9,
      histogram: { from: 0, to: 2, counts: [0, 0, 6000, 2000] },
      thinnestAt: [0, 0, 0],
    });
    fixture.componentRef.setInput('millimetres', 2);
    await fixture.whenStable();
    const host = fixture.nativeElement as HTMLElement;
    expect([...host.querySelectorAll('dd')].map((one) => one.textContent)).toEqual([
      '2.50 mm',
      '2.80 mm',
      '3.00 mm',
    ]);
    const bars = [...host.querySelectorAll('rect')];
    expect(bars.map((bar) => Number(bar.getAttribute('height')))).toEqual([0, 0, 72, 24]);
    expect(bars[2]!.textContent).toContain('2.00 mm to 3.00 mm: 75.0 %');
    expect(host.querySelector('svg')!.getAttribute('aria-label')).toMatch(/Usual wall 3\.00 mm/);
  });
});
