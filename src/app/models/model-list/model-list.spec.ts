import { signal } from '@angular/core';
import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { MatInputHarness } from '@angular/material/input/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { Router, provideRouter, withComponentInputBinding } from '@angular/router';
import { RouterTestingHarness } from '@angular/router/testing';
import { EMPTY } from 'rxjs';
import { type ModelResponse } from '../../../../shared/api/models.contract.js';
import { SessionStore } from '../../core/auth/session-store';
import { FailureNotes } from '../../core/errors/failure-notes';
import { Confirmations } from '../../ui/confirm-dialog/confirmations';
import { ModelsApi } from '../models-api';
import { idOf, makeModel } from '../testing/model-fixtures';
import { UploadQueue } from '../upload-queue';
import { ModelList } from './model-list';

// The first test compiles the templates, which takes its time on a busy machine.
vi.setConfig({ testTimeout: 30_000 });

const heron = makeModel({ id: idOf('heron'), name: 'Heron' }, { scaleConfirmed: false });
const bell = makeModel(
  { id: idOf('bell'), name: 'Harbour bell', planCount: 2 },
  { fileName: 'cowl.stl' },
);

async function setUp(
  url = '/models',
  models: readonly ModelResponse[] = [heron, bell],
  may = true,
) {
  const remove = vi.fn(() => Promise.resolve());
  const ask = vi.fn(() => Promise.resolve(true));
  const say = vi.fn();
  const add = vi.fn();
  TestBed.configureTestingModule({
    providers: [
      provideRouter([{ path: 'models', component: ModelList }], withComponentInputBinding()),
      { provide: SessionStore, useValue: { can: () => may } },
      { provide: ModelsApi, useValue: { list: () => Promise.resolve(models), remove } },
      { provide: UploadQueue, useValue: { uploads: signal([]), stored$: EMPTY, add } },
      { provide: Confirmations, useValue: { ask } },
      { provide: FailureNotes, useValue: { say, show: vi.fn() } },
    ],
  });
  const harness = await RouterTestingHarness.create(url);
  await harness.fixture.whenStable();
  const host = harness.routeNativeElement as HTMLElement;
  const names = () => [...host.querySelectorAll('tbody .name')].map((name) => name.textContent);
  const loader = TestbedHarnessEnvironment.loader(harness.fixture);
  return { host, names, loader, remove, ask, say, add, router: TestBed.inject(Router) };
}

describe('ModelList', () => {
  it('shows every model with size and state, and a guessed size as guessed', async () => {
    const { host } = await setUp();
    const rows = [...host.querySelectorAll('tbody tr')].map((row) =>
      row.textContent.replace(/[\s\u00a0]+/g, ' '),
    );
    expect(rows[0]).toContain('10.0 × 20.0 × 40.0 mm guessed');
    expect(rows[1]).not.toContain('guessed');
    expect(rows[1]).toContain('Ready to plan');
  });

  it('takes the search from the address and writes it back', async () => {
    const { names, loader, router } = await setUp('/models?q=her');
    await vi.waitFor(() => expect(names()).toEqual(['Heron']));
    const search = await loader.getHarness(MatInputHarness);
    expect(await search.getValue()).toBe('her');
    await search.setValue('bell');
    expect(names()).toEqual(['Harbour bell']);
    await vi.waitFor(() => expect(router.url).toBe('/models?q=bell'));
    await search.setValue('');
    await vi.waitFor(() => expect(router.url).toBe('/models'));
    expect(names()).toHaveLength(2);
  });

  it('removes a model after a question', async () => {
    const { names, loader, remove, ask } = await setUp();
    const selector = '[aria-label="Remove Heron"]';
    await (await loader.getHarness(MatButtonHarness.with({ selector }))).click();
    expect(ask).toHaveBeenCalledTimes(1);
    expect(remove).toHaveBeenCalledWith(heron.id);
    expect(names()).toEqual(['Harbour bell']);
  });

  it('does not even ask when plans keep the model, and says so', async () => {
    const { loader, remove, ask, say } = await setUp();
    const selector = '[aria-label="Remove Harbour bell"]';
    await (await loader.getHarness(MatButtonHarness.with({ selector }))).click();
    expect(ask).not.toHaveBeenCalled();
    expect(remove).not.toHaveBeenCalled();
    expect(say).toHaveBeenCalledWith(expect.stringContaining('2 plans'));
  });

  it('says what to do next when there is no model', async () => {
    const { host } = await setUp('/models', []);
    expect(host.textContent).toContain('No model yet');
    expect(host.querySelector('input[type="search"]')).toBeNull();
  });

  it('offers readers neither upload nor removal, and says who may', async () => {
    const { host } = await setUp('/models', [heron], false);
    expect(host.querySelector('sw-file-drop')).toBeNull();
    expect(host.querySelector('button')).toBeNull();
    expect(host.textContent).toContain('Designers, shop leads and owners add models');
  });
});
