import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { type HarnessLoader } from '@angular/cdk/testing';
import { MatSliderHarness } from '@angular/material/slider/testing';
import { MatButtonToggleHarness } from '@angular/material/button-toggle/testing';
import { usualWishes } from '../../../../shared/jobs/plan-wishes.js';
import { TestBed } from '@angular/core/testing';
import { provideRouter } from '@angular/router';
import { MatButtonHarness } from '@angular/material/button/testing';
import { MatInputHarness } from '@angular/material/input/testing';
import { MatSelectHarness } from '@angular/material/select/testing';
import { makeRectangular, makeRound } from '../../envelopes/testing/envelope-fixtures';
import { PlanStarter, type PlanOrder } from './plan-starter';

// The first test compiles the templates, which takes its time on a busy machine.
vi.setConfig({ testTimeout: 30_000 });

const bench = makeRectangular({ id: 'bench'.padEnd(20, '0'), name: 'Bench' });
const tall = makeRound({ id: 'tall'.padEnd(20, '0'), name: 'Tall' });

async function setUp(inputs: Record<string, unknown>) {
  TestBed.configureTestingModule({ providers: [provideRouter([])] });
  const fixture = TestBed.createComponent(PlanStarter);
  for (const [name, value] of Object.entries(inputs)) fixture.componentRef.setInput(name, value);
  const orders: PlanOrder[] = [];
  fixture.componentInstance.ordered.subscribe((order) => orders.push(order));
  await fixture.whenStable();
  const loader = TestbedHarnessEnvironment.loader(fixture);
  const text = () => (fixture.nativeElement as HTMLElement).textContent;
  const order = async () =>
    (await loader.getHarness(MatButtonHarness.with({ text: 'Make a plan' }))).click();
  return { loader, orders, text, order };
}

const seedField = (loader: HarnessLoader) =>
  loader.getHarness(MatInputHarness.with({ selector: '[formControlName=seed]' }));

describe('PlanStarter', () => {
  it('orders with the first envelope and seed 1 unless told otherwise', async () => {
    const { orders, order } = await setUp({ envelopes: [bench, tall] });
    await order();
    expect(orders).toEqual([
      { envelopeId: bench.id, otherEnvelopeIds: [], seed: 1, wishes: usualWishes },
    ]);
  });

  it('starts with the envelope that was used last', async () => {
    const { loader, text } = await setUp({ envelopes: [bench, tall], suggestedId: tall.id });
    const select = await loader.getHarness(MatSelectHarness.with({ ancestor: 'form' }));
    expect(await select.getValueText()).toBe('Tall');
    expect(text().replaceAll('\u00a0', ' ')).toContain('⌀ 200 mm, 300 mm high, margin 2 mm');
  });

  it('passes the chosen envelope and seed on', async () => {
    const { loader, orders, order } = await setUp({ envelopes: [bench, tall] });
    const select = await loader.getHarness(MatSelectHarness.with({ ancestor: 'form' }));
    await select.open();
    await select.clickOptions({ text: /^Tall/ });
    await (await seedField(loader)).setValue('42');
    await order();
    expect(orders).toMatchObject([{ envelopeId: tall.id, seed: 42 }]);
  });

  it.each(['', '-1', '1.5', '2147483648'])('does not order with the seed %j', async (seed) => {
    const { loader, orders, order } = await setUp({ envelopes: [bench] });
    await (await seedField(loader)).setValue(seed);
    await order();
    expect(orders).toEqual([]);
  });

  it('passes on what matters: a preset, a slider moved after it, and where it is looked at from', async () => {
    const { loader, orders, order, text } = await setUp({ envelopes: [bench] });
    const preset = await loader.getHarness(MatSelectHarness.with({ ancestor: '.wishes' }));
    await preset.open();
    await preset.clickOptions({ text: 'Clean printing' });
    const sliders = await loader.getAllHarnesses(MatSliderHarness);
    expect(sliders).toHaveLength(4);
    await (await sliders[0]!.getEndThumb()).setValue(0.65);
    expect(await preset.getValueText()).toBe('Own mixture');
    await (await loader.getHarness(MatButtonToggleHarness.with({ text: 'Front' }))).check();
    await order();
    expect(orders[0]!.wishes).toMatchObject({
      preferences: { fewPieces: 0.65, littleSupport: 1, hiddenSeams: 0.2, sturdySeams: 0.2 },
      showDirections: [[0, -1, 0]],
    });
    expect(text()).toContain('None chosen: every side counts alike.');
  });

  it('takes zones and own cuts by numbers, and does not order while one is missing', async () => {
    const { loader, orders, order } = await setUp({ envelopes: [bench] });
    const press = async (words: string) =>
      (await loader.getHarness(MatButtonHarness.with({ text: words }))).click();
    const field = (name: string) =>
      loader.getHarness(
        MatInputHarness.with({
          selector: `[ng-reflect-name="${name}"], [formControlName="${name}"]`,
        }),
      );
    await press('Add a zone');
    await press('Add a cut');
    await (await field('at')).setValue('');
    await order();
    expect(orders).toEqual([]);
    await (await field('at')).setValue('120.5');
    await (await field('name')).setValue('Lettering');
    await order();
    expect(orders[0]!.wishes).toMatchObject({
      keepWhole: [{ shape: 'box', name: 'Lettering', min: [-10, -10, -10], max: [10, 10, 10] }],
      lockedCuts: [{ normal: [0, 0, 1], offset: 120.5 }],
    });
  });

  it('offers further envelopes for what the first does not hold', async () => {
    const { loader, orders, order } = await setUp({ envelopes: [bench, tall] });
    const others = await loader.getHarness(MatSelectHarness.with({ ancestor: 'details' }));
    await others.open();
    await others.clickOptions({ text: /^Tall/ });
    await order();
    expect(orders[0]).toMatchObject({ envelopeId: bench.id, otherEnvelopeIds: [tall.id] });
  });

  it('says what to do when there is no envelope, according to the role', async () => {
    const maker = await setUp({ envelopes: [] });
    expect(maker.text()).toContain('Ask a shop lead');
    TestBed.resetTestingModule();
    const lead = await setUp({ envelopes: [], mayEditEnvelopes: true });
    expect(lead.text()).toContain('Make the first envelope');
  });
});
