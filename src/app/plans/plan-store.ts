import { Injectable, type OnDestroy, computed, inject, linkedSignal, signal } from '@angular/core';
import { type Subscription } from 'rxjs';
import { type JobResponse } from '../../../shared/api/jobs.contract.js';
import { type PlanRequest, type PlanResponse } from '../../../shared/api/plans.contract.js';
import { isFinal } from '../../../shared/jobs/job-map.js';
import { sentenceFor } from '../core/http/api-failure';
import { JobWatcher } from '../core/jobs/job-watcher';
import { JobsApi } from '../core/jobs/jobs-api';
import { ViewFiles } from '../viewer/view-files';
import { type SceneView } from '../viewer/scene/piece-stage';
import { pictureOf, type PlanPicture } from './plan-scene';
import { PlansApi } from './plans-api';

/** Where the slider goes when a person asks for the spread view without saying how far. */
const USUAL_SPREAD = 0.5;

/** How the picture is shown. */
export type PlanView = 'assembled' | 'spread' | 'bed';

/** One plan while its page is open: its record, the job that makes it, its picture, the selection. */
@Injectable()
export class PlanStore implements OnDestroy {
  private readonly api = inject(PlansApi);
  private readonly jobs = inject(JobsApi);
  private readonly watcher = inject(JobWatcher);
  private readonly files = inject(ViewFiles);

  private readonly _plan = signal<PlanResponse | null>(null);
  private readonly _failure = signal('');
  private readonly _picture = signal<PlanPicture | null>(null);
  private readonly _pictureFailure = signal('');
  private readonly _isCancelling = signal(false);
  private readonly _isFinishing = signal(false);
  private readonly _isOnBed = signal(false);
  private readonly _spread = signal(0);
  private openId = '';
  private watching: Subscription | null = null;

  readonly plan = this._plan.asReadonly();
  /** Why there is no plan to show; empty otherwise. */
  readonly failure = this._failure.asReadonly();
  readonly picture = this._picture.asReadonly();
  readonly pictureFailure = this._pictureFailure.asReadonly();
  readonly isCancelling = this._isCancelling.asReadonly();
  readonly isFinishing = this._isFinishing.asReadonly();
  readonly spread = this._spread.asReadonly();
  readonly result = computed(() => this.plan()?.result ?? null);
  readonly pieces = computed(() => this.result()?.pieces ?? []);
  private readonly liveJob = linkedSignal<PlanResponse | null, JobResponse | null>({
    source: this._plan,
    computation: (plan) => plan?.job ?? null,
  });
  readonly job = this.liveJob.asReadonly();
  private readonly _selected = linkedSignal<PlanResponse | null, string | null>({
    source: this._plan,
    computation: () => null,
  });
  readonly selected = this._selected.asReadonly();
  readonly selectedPiece = computed(
    () => this.pieces().find((piece) => piece.name === this.selected()) ?? null,
  );
  readonly view = computed((): PlanView => {
    if (this._isOnBed()) return 'bed';
    return this.spread() > 0 ? 'spread' : 'assembled';
  });
  readonly sceneView = computed((): SceneView => (this._isOnBed() ? 'bed' : 'whole'));
  readonly failedChecks = computed(
    () => this.result()?.proof.filter((row) => !row.passed).length ?? 0,
  );

  /** Shows a plan; while it is being made, follows its job and shows the result when it is there. */
  async open(id: string): Promise<void> {
    this.close();
    this.openId = id;
    try {
      const plan = await this.api.plan(id);
      if (this.openId === id) this.take(plan);
    } catch (error) {
      if (this.openId === id) this._failure.set(sentenceFor(error));
    }
  }

  /** Asks for the job to stop; it stops at its next step. */
  async cancel(): Promise<void> {
    const job = this.job();
    if (!job || isFinal(job.state)) return;
    this._isCancelling.set(true);
    try {
      await this.jobs.cancel(job.id);
    } catch (error) {
      this._isCancelling.set(false);
      throw error;
    }
  }

  /** Asks for the search to end with the best it has found. */
  async takeBest(): Promise<void> {
    const job = this.job();
    if (!job || isFinal(job.state)) return;
    this._isFinishing.set(true);
    try {
      await this.jobs.enough(job.id);
    } catch (error) {
      this._isFinishing.set(false);
      throw error;
    }
  }

  /** Makes the same plan anew, from the same model, envelopes, wishes and seed. Returns its identifier. */
  async makeAgain(): Promise<string> {
    const plan = this._plan();
    if (!plan) throw new Error('There is no plan to make again.');
    const { modelId, seed, envelope, otherEnvelopes, wishes } = plan;
    const otherEnvelopeIds = otherEnvelopes.map((one) => one.id);
    return (
      await this.api.make({ modelId, seed, envelopeId: envelope.id, otherEnvelopeIds, wishes })
    ).id;
  }

  /** Makes another of the plans that the search found. Returns the new plan's identifier. */
  async makeOffer(offer: number): Promise<string> {
    const plan = this._plan();
    if (!plan) throw new Error('There is no plan whose offers could be made.');
    return (await this.api.make({ modelId: plan.modelId, fromOffer: { planId: plan.id, offer } }))
      .id;
  }

  /** Makes the same cuts with other joints or orientations. Returns the new plan's identifier. */
  async remake(changes: Omit<NonNullable<PlanRequest['fromPlan']>, 'planId'>): Promise<string> {
    const plan = this._plan();
    if (!plan) throw new Error('There is no plan to make another way.');
    const { id: planId, modelId } = plan;
    return (await this.api.make({ modelId, fromPlan: { planId, ...changes } })).id;
  }

  /** Records why the files are wanted although a check failed. */
  async release(reason: string): Promise<void> {
    const plan = await this.api.release(this.openId, reason);
    if (this.openId === plan.id)
      this._plan.update((now) => now && { ...now, release: plan.release });
  }

  async remove(): Promise<void> {
    await this.api.remove(this.openId);
  }

  select(name: string | null): void {
    const isKnown = name !== null && this.pieces().some((piece) => piece.name === name);
    this._selected.set(isKnown ? name : null);
  }

  /** Selects the piece a number of rows further on, round the ends. */
  step(rows: number): void {
    const pieces = this.pieces();
    if (pieces.length === 0) return;
    const at = pieces.findIndex((piece) => piece.name === this.selected());
    const from = at < 0 ? (rows > 0 ? -1 : 0) : at;
    const next = (from + rows + pieces.length) % pieces.length;
    this._selected.set(pieces[next]!.name);
  }

  /** @param fraction 0 assembled … 1 as far apart as it goes */
  setSpread(fraction: number): void {
    this._isOnBed.set(false);
    this._spread.set(Math.min(Math.max(fraction, 0), 1));
  }

  setView(view: PlanView): void {
    this._isOnBed.set(view === 'bed');
    // Only one piece lies on the bed, so one has to be chosen.
    if (view === 'bed' && this.selected() === null) this.step(1);
    if (view === 'assembled') this._spread.set(0);
    if (view === 'spread' && this.spread() === 0) this._spread.set(USUAL_SPREAD);
  }

  ngOnDestroy(): void {
    this.close();
  }

  private take(plan: PlanResponse): void {
    this._plan.set(plan);
    this._isCancelling.set(false);
    this._isFinishing.set(false);
    if (!isFinal(plan.job.state)) this.follow(plan);
    else if (plan.result) void this.loadPicture(plan);
  }

  private follow(plan: PlanResponse): void {
    this.watching = this.watcher.watch(plan.job.id).subscribe({
      next: (job) => this.liveJob.set(job),
      error: (error: unknown) => this._failure.set(sentenceFor(error)),
      complete: () => void this.reload(plan.id),
    });
  }

  private async reload(id: string): Promise<void> {
    try {
      const plan = await this.api.plan(id);
      if (this.openId === id) this.take(plan);
    } catch (error) {
      if (this.openId === id) this._failure.set(sentenceFor(error));
    }
  }

  private async loadPicture(plan: PlanResponse): Promise<void> {
    try {
      const parts = await this.files.planView(plan.id);
      if (this.openId === plan.id && plan.result) this._picture.set(pictureOf(plan.result, parts));
    } catch (error) {
      if (this.openId === plan.id) this._pictureFailure.set(sentenceFor(error));
    }
  }

  private close(): void {
    this.watching?.unsubscribe();
    this.watching = null;
    this.openId = '';
    this._plan.set(null);
    this._failure.set('');
    this._picture.set(null);
    this._pictureFailure.set('');
    this._isOnBed.set(false);
    this._spread.set(0);
  }
}
