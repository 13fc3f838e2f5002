import { usualWishes } from '../../../shared/jobs/plan-wishes.js';
import { TestBed } from '@angular/core/testing';
import { Subject } from 'rxjs';
import { type JobResponse } from '../../../shared/api/jobs.contract.js';
import { ApiFailure } from '../core/http/api-failure';
import { JobWatcher } from '../core/jobs/job-watcher';
import { JobsApi } from '../core/jobs/jobs-api';
import { ViewFiles } from '../viewer/view-files';
import { PlanStore } from './plan-store';
import { PlansApi } from './plans-api';
import { sampleJob, samplePlan, unfinishedPlan } from './testing/sample-plan';

function setUp() {
  const events = new Subject<JobResponse>();
  const api = { plan: vi.fn(async () => samplePlan()), make: vi.fn(), remove: vi.fn() };
  const jobs = { cancel: vi.fn(async () => undefined) };
  const files = { planView: vi.fn(async () => ({ surfaces: [], lines: [] })) };
  TestBed.configureTestingModule({
    providers: [
      PlanStore,
      { provide: PlansApi, useValue: api },
      { provide: JobsApi, useValue: jobs },
      { provide: JobWatcher, useValue: { watch: () => events } },
      { provide: ViewFiles, useValue: files },
    ],
  });
  return { store: TestBed.inject(PlanStore), api, jobs, files, events };
}

const planId = samplePlan().id;
const refusal = new ApiFailure('plan.notFound', 'There is no such plan.', 404);

describe('PlanStore', () => {
  it('shows a finished plan and fetches its picture', async () => {
    const { store } = setUp();
    await store.open(planId);
    expect(store.pieces()).toHaveLength(3);
    await vi.waitFor(() => expect(store.picture()).not.toBeNull());
    expect(store.failure()).toBe('');
  });

  it('follows the job of a plan that is being made and then shows its result', async () => {
    const { store, api, events } = setUp();
    api.plan.mockResolvedValueOnce(unfinishedPlan({ state: 'running', fraction: 0.1 }));
    await store.open(planId);
    expect(store.result()).toBeNull();
    events.next(sampleJob({ state: 'running', stage: 'Cutting', fraction: 0.6 }));
    expect(store.job()).toMatchObject({ stage: 'Cutting', fraction: 0.6 });
    events.next(sampleJob());
    events.complete();
    await vi.waitFor(() => expect(store.pieces()).toHaveLength(3));
  });

  it('says why there is no plan', async () => {
    const { store, api } = setUp();
    api.plan.mockRejectedValueOnce(refusal);
    await store.open(planId);
    expect(store.failure()).toBe('There is no such plan.');
  });

  it('keeps the numbers when the picture cannot be fetched', async () => {
    const { store, files } = setUp();
    files.planView.mockRejectedValueOnce(refusal);
    await store.open(planId);
    await vi.waitFor(() => expect(store.pictureFailure()).not.toBe(''));
    expect(store.pieces()).toHaveLength(3);
    expect(store.failure()).toBe('');
  });

  it('drops the answer to a plan that is no longer open', async () => {
    const { store, api } = setUp();
    let answer: (plan: ReturnType<typeof samplePlan>) => void = () => undefined;
    api.plan.mockImplementationOnce(() => new Promise((resolve) => (answer = resolve)));
    const first = store.open('old');
    api.plan.mockResolvedValueOnce(samplePlan({ number: 9 }));
    await store.open('new');
    answer(samplePlan({ number: 1 }));
    await first;
    expect(store.plan()?.number).toBe(9);
  });

  it('shows that it is stopping until the job says so, and not when the cancel was refused', async () => {
    const { store, api, jobs, events } = setUp();
    api.plan.mockResolvedValueOnce(unfinishedPlan({ state: 'running' }));
    await store.open(planId);
    jobs.cancel.mockRejectedValueOnce(refusal);
    await expect(store.cancel()).rejects.toBe(refusal);
    expect(store.isCancelling()).toBe(false);
    await store.cancel();
    expect(store.isCancelling()).toBe(true);
    api.plan.mockResolvedValueOnce(unfinishedPlan({ state: 'cancelled' }));
    events.complete();
    await vi.waitFor(() => expect(store.isCancelling()).toBe(false));
    expect(store.job()?.state).toBe('cancelled');
  });

  it('asks for the same model, envelopes, wishes and seed when a plan is made again', async () => {
    const { store, api } = setUp();
    await store.open(planId);
    api.make.mockResolvedValueOnce({ id: 'q' });
    await expect(store.makeAgain()).resolves.toBe('q');
    expect(api.make).toHaveBeenCalledWith({
      modelId: 'm'.repeat(20),
      envelopeId: 'e'.repeat(20),
      otherEnvelopeIds: [],
      wishes: usualWishes,
      seed: 1,
    });
  });

  it('selects known pieces only and steps round the ends', async () => {
    const { store } = setUp();
    await store.open(planId);
    store.select('P99');
    expect(store.selected()).toBeNull();
    store.step(1);
    expect(store.selected()).toBe('P01');
    store.step(-1);
    expect(store.selectedPiece()?.name).toBe('P03');
    store.step(1);
    expect(store.selected()).toBe('P01');
  });

  it('keeps view and spread in step', async () => {
    const { store } = setUp();
    await store.open(planId);
    expect(store.view()).toBe('assembled');
    store.setSpread(0.3);
    expect(store.view()).toBe('spread');
    store.setView('bed');
    expect(store.sceneView()).toBe('bed');
    expect(store.selected()).toBe('P01');
    store.setSpread(2);
    expect(store.view()).toBe('spread');
    expect(store.spread()).toBe(1);
    store.setView('assembled');
    expect(store.spread()).toBe(0);
    store.setView('spread');
    expect(store.spread()).toBeGreaterThan(0);
  });

  it('counts the checks that failed', async () => {
    const { store, api } = setUp();
    const plan = samplePlan();
    plan.result!.proof[1]!.passed = false;
    api.plan.mockResolvedValueOnce(plan);
    await store.open(planId);
    expect(store.failedChecks()).toBe(1);
  });
});
