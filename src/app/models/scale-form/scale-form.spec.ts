import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { MatCheckboxHarness } from '@angular/material/checkbox/testing';
import { MatInputHarness } from '@angular/material/input/testing';
import { MatRadioButtonHarness } from '@angular/material/radio/testing';
import { type ModelScale } from '../../../../shared/api/model-scale.js';
import { ScaleForm } from './scale-form';

// The first test compiles the templates, which takes its time on a busy machine.
vi.setConfig({ testTimeout: 30_000 });

async function setUp(inputs: Record<string, unknown> = {}) {
  const fixture = TestBed.createComponent(ScaleForm);
  const all = {
    fileSize: [10, 20, 40],
    scale: { unit: 'mm', factor: 1, target: null },
    isConfirmed: true,
    ...inputs,
  };
  for (const [name, value] of Object.entries(all)) fixture.componentRef.setInput(name, value);
  const chosen: ModelScale[] = [];
  fixture.componentInstance.scaleChosen.subscribe((scale) => chosen.push(scale));
  await fixture.whenStable();
  const text = () =>
    (fixture.nativeElement as HTMLElement).textContent.replace(/[\s\u00a0]+/g, ' ').trim();
  return { text, chosen, loader: TestbedHarnessEnvironment.loader(fixture) };
}

describe('ScaleForm', () => {
  it('shows the resulting size before anything is saved', async () => {
    const { text, chosen, loader } = await setUp();
    expect(text()).toContain('10.0 × 20.0 × 40.0 mm');
    await (await loader.getHarness(MatRadioButtonHarness.with({ label: '1 inch' }))).check();
    expect(text()).toContain('Will be254.0 × 508.0 × 1 016 mm');
    expect(chosen).toEqual([]);
  });

  it('stretches the model to a target length and saves that', async () => {
    const { text, chosen, loader } = await setUp();
    await (await loader.getHarness(MatCheckboxHarness)).check();
    expect(text()).toContain('fill in the number first');
    await (await loader.getHarness(MatInputHarness)).setValue('900');
    expect(text()).toContain('Will be225.0 × 450.0 × 900.0 mm');
    await (await loader.getHarness(MatButtonHarness.with({ text: 'Save this size' }))).click();
    expect(chosen).toEqual([{ unit: 'mm', factor: 1, target: { axis: 'z', lengthMm: 900 } }]);
  });

  it('marks a guess as a guess, with its reason, and lets it be confirmed as it is', async () => {
    const reason = 'The longest side is 40 in the file: plausible as millimetres.';
    const { text, chosen, loader } = await setUp({ isConfirmed: false, reason });
    expect(text()).toContain('this is a guess');
    expect(text()).toContain(reason);
    await (await loader.getHarness(MatButtonHarness.with({ text: 'The size is right' }))).click();
    expect(chosen).toEqual([{ unit: 'mm', factor: 1, target: null }]);
  });

  it('offers nothing to save when nothing changed or the reader may not', async () => {
    const { loader } = await setUp();
    expect(await loader.getHarnessOrNull(MatButtonHarness)).toBeNull();
    TestBed.resetTestingModule();
    const reader = await setUp({ isReadOnly: true, isConfirmed: false });
    expect(await reader.loader.getHarnessOrNull(MatButtonHarness)).toBeNull();
    const radio = await reader.loader.getHarness(MatRadioButtonHarness);
    expect(await radio.isDisabled()).toBe(true);
  });
});
