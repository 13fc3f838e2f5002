import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { MatCheckboxHarness } from '@angular/material/checkbox/testing';
import { MatInputHarness } from '@angular/material/input/testing';
import { noChoices, type MendingChoices } from '../../../../shared/jobs/mending-choices.js';
import { type HoleReport, type MeshReport } from '../../../../shared/jobs/model-inspect.js';
import { makeReport } from '../testing/model-fixtures';
import { filledBy, limitInFileUnits } from './hole-words';
import { MendingDesk } from './mending-desk';

const hole = (id: number, perimeter: number, isFilled = false): HoleReport => ({
  id,
  perimeter,
  edges: 4,
  centre: [id, 0, 0],
  reach: perimeter / 6,
  isFlat: true,
  isFilled,
});
const open = makeReport({
  plannable: false,
  closed: false,
  holes: [hole(1, 40), hole(2, 4), hole(3, 0.1, true)],
  holesFound: 3,
  asks: [{ kind: 'fill-holes', sentence: '2 holes are too large.', count: 2, longest: 40 }],
});

async function setUp(report: MeshReport, inputs: Record<string, unknown> = {}) {
  const fixture = TestBed.createComponent(MendingDesk);
  fixture.componentRef.setInput('report', report);
  fixture.componentRef.setInput('millimetres', 2);
  for (const [name, value] of Object.entries(inputs)) fixture.componentRef.setInput(name, value);
  const chosen: MendingChoices[] = [];
  const shown: number[] = [];
  const accepted = vi.fn();
  fixture.componentInstance.chosen.subscribe((choices) => chosen.push(choices));
  fixture.componentInstance.holeShown.subscribe((one) => shown.push(one.id));
  fixture.componentInstance.accepted.subscribe(accepted);
  await fixture.whenStable();
  const loader = TestbedHarnessEnvironment.loader(fixture);
  const button = (text: string | RegExp) => loader.getHarness(MatButtonHarness.with({ text }));
  return { host: fixture.nativeElement as HTMLElement, loader, button, chosen, shown, accepted };
}

describe('MendingDesk', () => {
  it('fills holes up to the length that was chosen, in the unit of the file', async () => {
    const { button, chosen, loader } = await setUp(open);
    // 40 units of 2 mm.
    const rim = await loader.getHarness(MatInputHarness.with({ selector: '[inputmode=decimal]' }));
    expect(await rim.getValue()).toBe('80');
    expect(await (await button(/^Fill/)).getText()).toBe('Fill 2 holes');
    await rim.setValue('10');
    await (await button('Fill 1 hole')).click();
    expect(chosen).toHaveLength(1);
    expect(chosen[0]!.fillHolesUpTo).toBeCloseTo(5, 1);
    expect(filledBy(open.holes, chosen[0]!.fillHolesUpTo!)).toBe(1);
  });

  it('lists the holes with their rims and flies to them', async () => {
    const { button, shown } = await setUp(open);
    const first = await button(/^my_locationHole 1|^Hole 1|Hole 1:/);
    expect((await first.getText()).replace(/\s+/g, ' ')).toContain(
      'Hole 1: rim 80.0 mm, 4 edges, flat, open',
    );
    await first.click();
    expect(shown).toEqual([1]);
  });

  it('has the surface rebuilt with valid numbers of cells only, and says how wide a cell is', async () => {
    const { button, chosen, loader, host } = await setUp(makeReport());
    const grid = await loader.getHarness(MatInputHarness.with({ selector: '[inputmode=numeric]' }));
    await grid.setValue('20');
    expect(await (await button('Rebuild')).isDisabled()).toBe(true);
    await grid.setValue('100');
    // 40 units of 2 mm along the longest side.
    expect(host.textContent).toContain('A cell is 0.8 mm wide');
    await (await button('Rebuild')).click();
    expect(chosen).toEqual([{ ...noChoices, remeshCells: 100 }]);
  });

  it('shows how far a rebuilt surface lies off before it is taken, and goes back', async () => {
    const report = makeReport({
      plannable: false,
      choices: { ...noChoices, remeshCells: 100 },
      remeshDeviation: { mean: 0.01, p95: 0.05, max: 0.4, samples: 24_000 },
      asks: [{ kind: 'accept', sentence: 'The surface was rebuilt on a grid.' }],
    });
    const { host, button, accepted, chosen } = await setUp(report);
    expect(host.textContent!.replace(/\s+/g, ' ')).toContain(
      '0.02 mm on average, 95 % within 0.1 mm, 0.8 mm at most',
    );
    await (await button('Use this solid')).click();
    expect(accepted).toHaveBeenCalledTimes(1);
    await (await button('Go back to the file as it came')).click();
    expect(chosen).toEqual([noChoices]);
  });

  it('takes chosen parts only', async () => {
    const report = makeReport({
      parts: [
        { name: 'Foot', facets: 12, isTaken: true },
        { name: 'Lid', facets: 80, isTaken: true },
      ],
    });
    const { loader, button, chosen } = await setUp(report);
    expect(await (await button('Use only these parts')).isDisabled()).toBe(true);
    const foot = await loader.getHarness(MatCheckboxHarness.with({ label: /^Foot/ }));
    await foot.uncheck();
    await (await button('Use only these parts')).click();
    expect(chosen).toEqual([{ ...noChoices, parts: [1] }]);
  });

  it('lets nothing be decided while an inspection runs, nor by those who may not', async () => {
    const busy = await setUp(open, { isBusy: true });
    expect(await (await busy.button(/^Fill/)).isDisabled()).toBe(true);
    const reader = await setUp(open, { isReadOnly: true });
    expect(reader.host.textContent).toContain('2 holes are too large.');
    expect(reader.host.textContent).not.toContain('Rebuild');
  });
});

describe('a limit that was read off the list', () => {
  it('means the rim that shows it, though both are rounded', () => {
    expect(limitInFileUnits(12.3, 1)).toBeGreaterThan(12.349);
    expect(limitInFileUnits(25.4, 25.4)).toBeCloseTo(1, 2);
  });
});
