import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { MatProgressBarHarness } from '@angular/material/progress-bar/testing';
import { type JobResponse } from '../../../../shared/api/jobs.contract.js';
import { JobProgress } from './job-progress';

// The first test compiles the templates, which takes its time on a busy machine.
vi.setConfig({ testTimeout: 30_000 });

const job: JobResponse = {
  id: 'j'.repeat(20),
  kind: 'plan.make',
  state: 'running',
  stage: 'Searching for cuts',
  fraction: 0.427,
  error: null,
};

async function setUp(change: Partial<JobResponse>, inputs: Record<string, unknown> = {}) {
  const fixture = TestBed.createComponent(JobProgress);
  fixture.componentRef.setInput('job', { ...job, ...change });
  fixture.componentRef.setInput('title', 'The plan');
  for (const [name, value] of Object.entries(inputs)) fixture.componentRef.setInput(name, value);
  await fixture.whenStable();
  const text = () => (fixture.nativeElement as HTMLElement).textContent.replace(/\s+/g, ' ').trim();
  return { fixture, text, loader: TestbedHarnessEnvironment.loader(fixture) };
}

describe('JobProgress', () => {
  it('shows the step and how far it is', async () => {
    const { text, loader } = await setUp({});
    expect(text()).toContain('Searching for cuts');
    expect(text()).toContain('42 %');
    const bar = await loader.getHarness(MatProgressBarHarness);
    expect(await bar.getValue()).toBe(42);
    expect(await bar.getMode()).toBe('determinate');
  });

  it('says that a queued job waits', async () => {
    const { text } = await setUp({ state: 'queued', stage: '', fraction: 0 });
    expect(text()).toContain('Waiting for a free worker');
  });

  it('asks for the cancel once and shows that it is on its way', async () => {
    const { fixture, text, loader } = await setUp({}, { canCancel: true });
    let asked = 0;
    fixture.componentInstance.cancelAsked.subscribe(() => asked++);
    const cancel = await loader.getHarness(MatButtonHarness.with({ text: 'Cancel' }));
    await cancel.click();
    expect(asked).toBe(1);
    fixture.componentRef.setInput('isCancelling', true);
    await fixture.whenStable();
    expect(text()).toContain('Stopping');
    expect(await cancel.isDisabled()).toBe(true);
  });

  it('offers no cancel to those who may not', async () => {
    const { loader } = await setUp({});
    expect(await loader.getHarnessOrNull(MatButtonHarness)).toBeNull();
  });

  it('gives the reason of a failure and no bar', async () => {
    const message = 'The plan would need 812 pieces; at most 400 are made.';
    const { text, loader } = await setUp({ state: 'failed', error: { code: 'refused', message } });
    expect(text()).toContain(message);
    expect(text()).not.toContain('did not work');
    expect(await loader.getHarnessOrNull(MatProgressBarHarness)).toBeNull();
  });

  it('says so when the failure is ours and not that of the input', async () => {
    const error = { code: 'failed' as const, message: 'Something broke on our side.' };
    const { text } = await setUp({ state: 'failed', error });
    expect(text()).toContain('The plan did not work. Something broke on our side.');
  });

  it('says that it was cancelled', async () => {
    const { text } = await setUp({ state: 'cancelled' });
    expect(text()).toContain('The plan was cancelled');
  });
});
