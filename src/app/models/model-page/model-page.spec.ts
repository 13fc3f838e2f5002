import { usualWishes } from '../../../../shared/jobs/plan-wishes.js';
import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { DeferBlockBehavior, TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { MatInputHarness } from '@angular/material/input/testing';
import { Router, provideRouter } from '@angular/router';
import { NEVER } from 'rxjs';
import { type Action, type Role, may } from '../../../../shared/api/roles.js';
import { type ModelResponse } from '../../../../shared/api/models.contract.js';
import { SessionStore } from '../../core/auth/session-store';
import { ApiFailure } from '../../core/http/api-failure';
import { JobWatcher } from '../../core/jobs/job-watcher';
import { JobsApi } from '../../core/jobs/jobs-api';
import { makeRectangular } from '../../envelopes/testing/envelope-fixtures';
import { ModelsApi } from '../models-api';
import { PlanOrdersApi } from '../plan-orders-api';
import { idOf, makeJob, makeModel, makeReport } from '../testing/model-fixtures';
import { ModelPage } from './model-page';

// The first test waits for the code of the drawing, which the page loads late.
vi.setConfig({ testTimeout: 30_000 });

const planId = idOf('plan');

async function setUp(
  setting: {
    model?: ModelResponse | ApiFailure;
    role?: Role;
    order?: () => Promise<unknown>;
  } = {},
) {
  const answer = setting.model ?? makeModel();
  const get = () =>
    answer instanceof ApiFailure ? Promise.reject(answer) : Promise.resolve(answer);
  const change = vi.fn((_id: string, request: { name?: string }) =>
    Promise.resolve(makeModel({ name: request.name ?? 'Heron' })),
  );
  const mend = vi.fn(() => Promise.resolve(makeModel()));
  const revisions = () => Promise.resolve([]);
  const cancel = vi.fn(() => Promise.resolve());
  const order = vi.fn(setting.order ?? (() => Promise.resolve({ id: planId })));
  TestBed.configureTestingModule({
    imports: [ModelPage],
    deferBlockBehavior: DeferBlockBehavior.Manual,
    providers: [
      provideRouter([{ path: '**', children: [] }]),
      {
        provide: SessionStore,
        useValue: { can: (action: Action) => may(setting.role ?? 'designer', action) },
      },
      { provide: ModelsApi, useValue: { get, change, mend, revisions } },
      { provide: JobsApi, useValue: { cancel } },
      { provide: JobWatcher, useValue: { watch: () => NEVER } },
      {
        provide: PlanOrdersApi,
        useValue: {
          plans: () => Promise.resolve([]),
          envelopes: () => Promise.resolve([makeRectangular()]),
          materials: () => Promise.resolve([]),
          order,
        },
      },
    ],
  });
  await TestBed.compileComponents();
  const fixture = TestBed.createComponent(ModelPage);
  fixture.componentRef.setInput('modelId', idOf('model'));
  await fixture.whenStable();
  await fixture.whenStable();
  const host = fixture.nativeElement as HTMLElement;
  const loader = TestbedHarnessEnvironment.loader(fixture);
  const press = async (text: string | RegExp) =>
    (await loader.getHarness(MatButtonHarness.with({ text }))).click();
  return { host, loader, press, change, cancel, mend, order, router: TestBed.inject(Router) };
}

describe('ModelPage', () => {
  it('orders a plan and goes to its sheet', async () => {
    const { press, order, router } = await setUp();
    await press('Make a plan');
    expect(order).toHaveBeenCalledWith({
      modelId: idOf('model'),
      envelopeId: makeRectangular().id,
      otherEnvelopeIds: [],
      wishes: usualWishes,
      seed: 1,
    });
    await vi.waitFor(() => expect(router.url).toBe(`/plans/${planId}`));
  });

  it('shows why a plan was refused and stays', async () => {
    const refusal = new ApiFailure('model.notReady', 'It has not been inspected yet.', 409);
    const { press, host, router } = await setUp({ order: () => Promise.reject(refusal) });
    await press('Make a plan');
    expect(host.textContent).toContain('It has not been inspected yet.');
    expect(router.url).toBe('/');
  });

  it('renames the model in its heading', async () => {
    const { host, loader, press, change } = await setUp();
    const pen = MatButtonHarness.with({ selector: '[aria-label="Change the name"]' });
    await (await loader.getHarness(pen)).click();
    const input = await loader.getHarness(MatInputHarness.with({ selector: 'sw-rename-field *' }));
    await input.setValue('  Grey heron ');
    await press('Save');
    expect(change).toHaveBeenCalledWith(idOf('model'), { name: 'Grey heron' });
    await vi.waitFor(() => expect(host.querySelector('h1')?.textContent).toBe('Grey heron'));
  });

  it('shows a running inspection and stops it on demand', async () => {
    const job = makeJob({ state: 'running', stage: 'Welding vertices', fraction: 0.42 });
    const { host, press, cancel } = await setUp({ model: makeModel({}, { report: null, job }) });
    expect(host.textContent).toContain('Welding vertices');
    expect(host.textContent).not.toContain('Make a plan');
    await press('Cancel');
    expect(cancel).toHaveBeenCalledWith(job.id);
  });

  it('says why a mesh cannot be planned and what to do next, and offers no plan', async () => {
    const refusal = 'The surface has 1 212 open edges.';
    const report = makeReport({ plannable: false, refusal, closed: false, openEdges: 1212 });
    const { host } = await setUp({ model: makeModel({}, { report }) });
    expect(host.textContent).toContain(refusal);
    expect(host.textContent).toContain('What to do next');
    expect(host.textContent).not.toContain('Make a plan');
  });

  it('asks what has to be decided, has it inspected again, and offers no plan before', async () => {
    const report = makeReport({
      plannable: false,
      closed: false,
      asks: [{ kind: 'remesh', sentence: 'Mending left 4 edges open.' }],
    });
    const { host, press, mend } = await setUp({ model: makeModel({}, { report }) });
    expect(host.textContent).toContain('What to decide');
    expect(host.textContent).toContain('Mending left 4 edges open.');
    expect(host.textContent).not.toContain('Make a plan');
    await press('Rebuild');
    expect(mend).toHaveBeenCalledWith(idOf('model'), {
      parts: null,
      fillHolesUpTo: null,
      remeshCells: 400,
    });
  });

  it('takes a solid that differs from its file on demand', async () => {
    const report = makeReport({
      plannable: false,
      asks: [{ kind: 'accept', sentence: 'Mending made the volume 3 % larger.' }],
    });
    const { press, change } = await setUp({ model: makeModel({}, { report }) });
    await press('Use this solid');
    expect(change).toHaveBeenCalledWith(idOf('model'), { accept: true });
  });

  it('lets makers look and change nothing', async () => {
    const { host, loader } = await setUp({ role: 'maker' });
    expect(host.textContent).toContain('What the file holds');
    expect(await loader.getAllHarnesses(MatButtonHarness)).toHaveLength(0);
  });

  it('says that there is no such model', async () => {
    const model = new ApiFailure('model.notFound', 'There is no such model.', 404);
    const { host } = await setUp({ model });
    expect(host.querySelector('h1')?.textContent).toContain('cannot be shown');
    expect(host.textContent).toContain('There is no such model.');
  });
});
