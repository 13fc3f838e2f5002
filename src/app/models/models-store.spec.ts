import { TestBed } from '@angular/core/testing';
import { Subject } from 'rxjs';
import { type ModelResponse } from '../../../shared/api/models.contract.js';
import { ApiFailure } from '../core/http/api-failure';
import { ModelsApi } from './models-api';
import { ModelsStore, lookAgainMs } from './models-store';
import { idOf, makeJob, makeModel } from './testing/model-fixtures';
import { UploadQueue } from './upload-queue';

const heron = makeModel({ id: idOf('heron'), name: 'Heron', createdAt: '2031-01-01T00:00:00Z' });
const bell = makeModel(
  { id: idOf('bell'), name: 'Harbour bell', createdAt: '2031-02-01T00:00:00Z' },
  { fileName: 'cowl v2.stl' },
);

function setUp(api: Partial<ModelsApi>) {
  const stored$ = new Subject<ModelResponse>();
  TestBed.configureTestingModule({
    providers: [
      ModelsStore,
      { provide: ModelsApi, useValue: api },
      { provide: UploadQueue, useValue: { stored$ } },
    ],
  });
  const store = TestBed.inject(ModelsStore);
  return { store, stored$, found: () => store.found()?.map((model) => model.name) };
}

describe('ModelsStore', () => {
  afterEach(() => vi.useRealTimers());

  it('lists the newest model first', async () => {
    const { store, found } = setUp({ list: () => Promise.resolve([heron, bell]) });
    expect(store.models()).toBeNull();
    await store.load();
    expect(found()).toEqual(['Harbour bell', 'Heron']);
  });

  it.each([
    ['', ['Harbour bell', 'Heron']],
    ['HER', ['Heron']],
    ['bell v2', ['Harbour bell']],
    ['  cowl ', ['Harbour bell']],
    ['zzz', []],
  ])('finds by the words of the name and the file: %j', async (query, names) => {
    const { store, found } = setUp({ list: () => Promise.resolve([heron, bell]) });
    await store.load();
    store.search(query);
    expect(found()).toEqual(names);
  });

  it('shows an upload at once', async () => {
    const { store, stored$, found } = setUp({ list: () => Promise.resolve([heron]) });
    await store.load();
    stored$.next(bell);
    expect(found()).toEqual(['Harbour bell', 'Heron']);
  });

  it('puts a failed look into words', async () => {
    const away = new ApiFailure('network.unreachable', 'The server cannot be reached.', 0);
    const { store } = setUp({ list: () => Promise.reject(away) });
    await store.load();
    expect(store.problem()).toBe('The server cannot be reached.');
  });

  it('looks again while a model is inspected, and rests afterwards', async () => {
    vi.useFakeTimers();
    const running = makeModel({}, { job: makeJob({ state: 'running', fraction: 0.5 }) });
    const answers = [[running], [running], [makeModel()]];
    const list = vi.fn(() => Promise.resolve(answers.shift() ?? [makeModel()]));
    const { store } = setUp({ list });
    await store.load();
    TestBed.tick();
    await vi.advanceTimersByTimeAsync(2 * lookAgainMs);
    TestBed.tick();
    expect(list).toHaveBeenCalledTimes(3);
    await vi.advanceTimersByTimeAsync(5 * lookAgainMs);
    expect(list).toHaveBeenCalledTimes(3);
  });

  it('keeps the row when the server refuses to remove the model', async () => {
    const refusal = new ApiFailure('model.inUse', 'The model has a plan.', 409);
    const { store, found } = setUp({
      list: () => Promise.resolve([heron]),
      remove: () => Promise.reject(refusal),
    });
    await store.load();
    await expect(store.remove(heron.id)).rejects.toBe(refusal);
    expect(found()).toEqual(['Heron']);
  });
});
