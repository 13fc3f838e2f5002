import { TestBed } from '@angular/core/testing';
import { Subject } from 'rxjs';
import { type JobResponse } from '../../../shared/api/jobs.contract.js';
import { ApiFailure } from '../core/http/api-failure';
import { JobWatcher } from '../core/jobs/job-watcher';
import { JobsApi } from '../core/jobs/jobs-api';
import { ModelStore } from './model-store';
import { ModelsApi } from './models-api';
import { makeJob, makeModel } from './testing/model-fixtures';

const running = makeModel(
  {},
  { report: null, job: makeJob({ state: 'running', stage: 'Reading', fraction: 0.1 }) },
);

function setUp(api: Partial<ModelsApi>, jobs: Partial<JobsApi> = {}) {
  const job$ = new Subject<JobResponse>();
  const watch = vi.fn(() => job$);
  TestBed.configureTestingModule({
    providers: [
      ModelStore,
      { provide: ModelsApi, useValue: api },
      { provide: JobsApi, useValue: jobs },
      { provide: JobWatcher, useValue: { watch } },
    ],
  });
  return { store: TestBed.inject(ModelStore), job$, watch };
}

const settled = () => new Promise((resolve) => setTimeout(resolve));

describe('ModelStore', () => {
  it('follows the inspection and takes the report when it is over', async () => {
    const answers = [running, makeModel()];
    const { store, job$ } = setUp({ get: () => Promise.resolve(answers.shift() ?? makeModel()) });
    store.open(running.id);
    await settled();
    expect(store.isInspecting()).toBe(true);
    job$.next(makeJob({ state: 'running', stage: 'Welding', fraction: 0.6 }));
    expect(store.model()?.revision.job.stage).toBe('Welding');
    job$.complete();
    await settled();
    expect(store.isInspecting()).toBe(false);
    expect(store.model()?.revision.report).not.toBeNull();
  });

  it('watches no job of a model that is inspected already', async () => {
    const { store, watch } = setUp({ get: () => Promise.resolve(makeModel()) });
    store.open('x');
    await settled();
    expect(watch).not.toHaveBeenCalled();
  });

  it('says why a model cannot be shown', async () => {
    const missing = new ApiFailure('model.notFound', 'There is no such model.', 404);
    const { store } = setUp({ get: () => Promise.reject(missing) });
    store.open('x');
    await settled();
    expect(store.problem()).toBe('There is no such model.');
    expect(store.model()).toBeNull();
  });

  it('stops following when its page goes', async () => {
    const { store, job$ } = setUp({ get: () => Promise.resolve(running) });
    store.open(running.id);
    await settled();
    expect(job$.observed).toBe(true);
    TestBed.resetTestingModule();
    expect(job$.observed).toBe(false);
  });

  it('takes the answer of a change, not its own guess of it', async () => {
    const change = vi.fn(() => Promise.resolve(makeModel({ name: 'Grey heron' })));
    const { store } = setUp({ get: () => Promise.resolve(makeModel()), change });
    store.open('x');
    await settled();
    await store.change({ name: 'grey heron' });
    expect(store.model()?.name).toBe('Grey heron');
  });

  it('shows that a cancel is on its way, and takes that back when it is refused', async () => {
    const refusal = new ApiFailure('session.forbidden', 'Not for your role.', 403);
    const cancel = vi.fn(() => Promise.resolve());
    const { store } = setUp({ get: () => Promise.resolve(running) }, { cancel });
    store.open(running.id);
    await settled();
    await store.cancelInspection();
    expect(cancel).toHaveBeenCalledWith(running.revision.job.id);
    expect(store.isCancelling()).toBe(true);
    cancel.mockImplementation(() => Promise.reject(refusal));
    await expect(store.cancelInspection()).rejects.toBe(refusal);
    expect(store.isCancelling()).toBe(false);
  });
});
