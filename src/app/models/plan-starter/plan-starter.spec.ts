import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
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

describe('PlanStarter', () => {
  it('orders with the first envelope and seed 1 unless told otherwise', async () => {
    const { orders, order } = await setUp({ envelopes: [bench, tall] });
    await order();
    expect(orders).toEqual([{ envelopeId: bench.id, seed: 1 }]);
  });

  it('starts with the envelope that was used last', async () => {
    const { loader, text } = await setUp({ envelopes: [bench, tall], suggestedId: tall.id });
    const select = await loader.getHarness(MatSelectHarness);
    expect(await select.getValueText()).toBe('Tall');
    expect(text().replaceAll('\u00a0', ' ')).toContain('⌀ 200 mm, 300 mm high, margin 2 mm');
  });

  it('passes the chosen envelope and seed on', async () => {
    const { loader, orders, order } = await setUp({ envelopes: [bench, tall] });
    const select = await loader.getHarness(MatSelectHarness);
    await select.open();
    await select.clickOptions({ text: /^Tall/ });
    await (await loader.getHarness(MatInputHarness)).setValue('42');
    await order();
    expect(orders).toEqual([{ envelopeId: tall.id, seed: 42 }]);
  });

  it.each(['', '-1', '1.5', '2147483648'])('does not order with the seed %j', async (seed) => {
    const { loader, orders, order } = await setUp({ envelopes: [bench] });
    await (await loader.getHarness(MatInputHarness)).setValue(seed);
    await order();
    expect(orders).toEqual([]);
  });

  it('says what to do when there is no envelope, according to the role', async () => {
    const maker = await setUp({ envelopes: [] });
    expect(maker.text()).toContain('Ask a shop lead');
    TestBed.resetTestingModule();
    const lead = await setUp({ envelopes: [], mayEditEnvelopes: true });
    expect(lead.text()).toContain('Make the first envelope');
  });
});
