import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { ChangeDetectionStrategy, Component, input, output } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { MatButtonToggleHarness } from '@angular/material/button-toggle/testing';
import { MatSliderHarness } from '@angular/material/slider/testing';
import { provideRouter, Router } from '@angular/router';
import { NEVER } from 'rxjs';
import { type PlanResponse } from '../../../../shared/api/plans.contract.js';
import { SessionStore } from '../../core/auth/session-store';
import { JobWatcher } from '../../core/jobs/job-watcher';
import { JobsApi } from '../../core/jobs/jobs-api';
import { Confirmations } from '../../ui/confirm-dialog/confirmations';
import { ViewFiles } from '../../viewer/view-files';
import { Viewer } from '../../viewer/viewer';
import { PlanStore } from '../plan-store';
import { PlansApi } from '../plans-api';
import { PartsListHarness } from '../testing/parts-list-harness';
import { samplePlan, unfinishedPlan } from '../testing/sample-plan';
import { PlanPage } from './plan-page';

/** Stands for the picture, which needs a graphics card. */
@Component({
  selector: 'sw-viewer',
  template: '',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
class ViewerDouble {
  readonly pieces = input();
  readonly seams = input();
  readonly space = input();
  readonly selected = input<string | null>(null);
  readonly view = input<string>();
  readonly spread = input<number>();
  readonly description = input<string>();
  readonly pieceSelected = output<string | null>();
}

async function setUp(plan: PlanResponse, may: boolean = true) {
  const api = {
    plan: vi.fn(async () => plan),
    remove: vi.fn(async () => undefined),
    make: vi.fn(),
    downloadUrl: (id: string) => `/api/plans/${id}/download`,
  };
  TestBed.configureTestingModule({
    providers: [
      PlanStore,
      provideRouter([]),
      { provide: PlansApi, useValue: api },
      { provide: JobsApi, useValue: { cancel: vi.fn(async () => undefined) } },
      { provide: JobWatcher, useValue: { watch: () => NEVER } },
      { provide: ViewFiles, useValue: { planView: async () => ({ surfaces: [], lines: [] }) } },
      { provide: SessionStore, useValue: { can: () => may } },
      { provide: Confirmations, useValue: { ask: async () => true } },
    ],
  });
  TestBed.overrideComponent(PlanPage, {
    remove: { imports: [Viewer] },
    add: { imports: [ViewerDouble] },
  });
  const fixture = TestBed.createComponent(PlanPage);
  fixture.componentRef.setInput('planId', plan.id);
  await fixture.whenStable();
  await fixture.whenStable();
  const page = fixture.nativeElement as HTMLElement;
  const viewer = () =>
    fixture.debugElement.query((node) => node.name === 'sw-viewer')
      ?.componentInstance as ViewerDouble;
  return { fixture, page, viewer, api, loader: TestbedHarnessEnvironment.loader(fixture) };
}

describe('PlanPage', () => {
  it('offers the ZIP with its size as a plain download', async () => {
    const { page } = await setUp(samplePlan());
    const link = page.querySelector<HTMLAnchorElement>('a[download]')!;
    expect(link.getAttribute('href')).toBe(`/api/plans/${'p'.repeat(20)}/download`);
    expect(link.textContent).toMatch(/Download ZIP, 1\d\.\d.MB/);
  });

  it('says bounds, cuts with reasons, seams, proof and title block', async () => {
    const { page } = await setUp(samplePlan());
    const text = page.textContent;
    expect(text).toContain('3 pieces; no plan can have fewer than 2');
    expect(text).toContain('The second reason.');
    expect(text).toContain('P01 and P02');
    expect(text).toContain('Every piece fits');
    expect(page.querySelector('sw-title-block')?.textContent).toContain('Approved by');
    expect(page.querySelector('.warning')).toBeNull();
  });

  it('warns when a check of the proof failed', async () => {
    const plan = samplePlan();
    plan.result!.proof[0]!.passed = false;
    const { page } = await setUp(plan);
    expect(page.querySelector('.warning')?.textContent).toContain('One check');
    expect(page.querySelector('sw-proof-table')?.textContent).toContain('failed');
  });

  it('chooses a piece from the list in the picture and from the picture in the list', async () => {
    const { viewer, loader } = await setUp(samplePlan());
    const list = await loader.getHarness(PartsListHarness);
    await list.choose('P02');
    expect(viewer().selected()).toBe('P02');
    viewer().pieceSelected.emit('P03');
    expect(await list.chosen()).toEqual(['P03']);
    viewer().pieceSelected.emit(null);
    expect(await list.chosen()).toEqual([]);
  });

  it('spreads by the slider and goes to the bed by the switch', async () => {
    const { viewer, loader } = await setUp(samplePlan());
    const slider = await loader.getHarness(MatSliderHarness);
    await (await slider.getEndThumb()).setValue(40);
    expect(viewer().spread()).toBeCloseTo(0.4, 9);
    const bed = await loader.getHarness(MatButtonToggleHarness.with({ text: 'On the bed' }));
    await bed.check();
    expect(viewer().view()).toBe('bed');
    expect(viewer().selected()).toBe('P01');
  });

  it('says that a model of one piece fits as it is and shows no seams', async () => {
    const plan = samplePlan();
    plan.result = { ...plan.result!, pieces: plan.result!.pieces.slice(0, 1), seams: [] };
    const { page } = await setUp(plan);
    expect(page.textContent).toContain('The model fits as it is; there is nothing to cut.');
    expect(page.querySelector('sw-seams-list')).toBeNull();
    expect(page.querySelector('mat-slider')).toBeNull();
  });

  it('shows the step while the plan is being made, with a cancel for those who may', async () => {
    const job = { state: 'running', stage: 'Looking for cuts', fraction: 0.42 } as const;
    const { page } = await setUp(unfinishedPlan(job));
    expect(page.textContent).toContain('Looking for cuts');
    expect(page.textContent).toContain('42 %');
    const buttons = [...page.querySelectorAll('sw-job-progress button')];
    expect(buttons.map((button) => button.textContent.trim())).toEqual([
      'Take the best so far',
      'Cancel',
    ]);
    expect(page.textContent).toContain('Known so far');
  });

  it('lists the other plans that were found and makes one of them', async () => {
    const plan = samplePlan();
    const objectives = { pieces: 3, supportMm3: 9e4, visibleSeamMm: 700, weakestSeamKpa: 12 };
    const { tree } = plan.result!.recipe;
    plan.result = {
      ...plan.result!,
      chosenOffer: 0,
      offers: [
        { bestAt: ['nearest to what was asked'], objectives, tree },
        { bestAt: ['least support'], objectives: { ...objectives, supportMm3: 0 }, tree },
      ],
    };
    const { page, api } = await setUp(plan);
    api.make.mockResolvedValue({ ...plan, id: 'q'.repeat(20) });
    const navigate = vi.spyOn(TestBed.inject(Router), 'navigate').mockResolvedValue(true);
    const buttons = page.querySelectorAll<HTMLButtonElement>('sw-offers-table button');
    expect(buttons).toHaveLength(1);
    buttons[0]!.click();
    expect(api.make).toHaveBeenCalledWith({
      modelId: plan.modelId,
      fromOffer: { planId: plan.id, offer: 1 },
    });
    await vi.waitFor(() => expect(navigate).toHaveBeenCalledWith(['/plans', 'q'.repeat(20)]));
    expect(page.textContent).toContain('A bit of everything');
  });

  it('offers no cancel and no removal to those who may not', async () => {
    const { page } = await setUp(unfinishedPlan({ state: 'running' }), false);
    expect(page.querySelector('sw-job-progress button')).toBeNull();
    const finished = await setUpAgain(samplePlan());
    expect(finished.querySelector('button[aria-label="More actions"]')).toBeNull();
  });

  it('gives a refused plan two ways on', async () => {
    const error = { code: 'refused', message: 'About 1 240 pieces would be needed.' } as const;
    const { page } = await setUp(unfinishedPlan({ state: 'failed', error }));
    expect(page.textContent).toContain('About 1 240 pieces would be needed.');
    const links = [...page.querySelectorAll('.ways-on a')].map((link) => link.textContent.trim());
    expect(links).toEqual(['Choose a larger envelope', 'Back to the model']);
  });

  it('offers to make a plan again that failed by our fault or was cancelled', async () => {
    const { page } = await setUp(unfinishedPlan({ state: 'cancelled' }));
    expect(page.querySelector('.ways-on button')?.textContent).toContain('Make it again');
  });
});

async function setUpAgain(plan: PlanResponse): Promise<HTMLElement> {
  TestBed.resetTestingModule();
  return (await setUp(plan, false)).page;
}
