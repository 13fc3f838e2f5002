import { Injectable, computed, inject, signal } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { EMPTY, Subject, catchError, concat, defer, from, switchMap, tap } from 'rxjs';
import { type ModelPatchRequest, type ModelResponse } from '../../../shared/api/models.contract.js';
import { type MendingChoices } from '../../../shared/jobs/mending-choices.js';
import { sentenceFor } from '../core/http/api-failure';
import { JobWatcher } from '../core/jobs/job-watcher';
import { JobsApi } from '../core/jobs/jobs-api';
import { isInspecting } from './model-state';
import { ModelsApi } from './models-api';

/** The model a page shows, kept up to date while it is inspected. */
@Injectable()
export class ModelStore {
  private readonly api = inject(ModelsApi);
  private readonly jobs = inject(JobsApi);
  private readonly watcher = inject(JobWatcher);
  private readonly _model = signal<ModelResponse | null>(null);
  private readonly _problem = signal('');
  private readonly _isCancelling = signal(false);
  private readonly openings = new Subject<string>();

  /** Null until loaded. */
  readonly model = this._model.asReadonly();
  /** Why it could not be loaded, as a sentence; else empty. */
  readonly problem = this._problem.asReadonly();
  readonly isCancelling = this._isCancelling.asReadonly();
  readonly isInspecting = computed(() => {
    const model = this.model();
    return model !== null && isInspecting(model);
  });

  constructor() {
    this.openings
      .pipe(
        switchMap((id) => this.follow(id)),
        takeUntilDestroyed(),
      )
      .subscribe();
  }

  open(id: string): void {
    this._model.set(null);
    this.openings.next(id);
  }

  /** Renames, rescales or accepts; the server's refusal is passed on. */
  async change(request: ModelPatchRequest): Promise<void> {
    const model = this.model();
    if (model) this._model.set(await this.api.change(model.id, request));
  }

  /** Has the file inspected again with other choices and follows that. */
  async mend(choices: MendingChoices): Promise<void> {
    const model = this.model();
    if (model) this.show(await this.api.mend(model.id, choices));
  }

  /** Shows another state of the same model, such as its next revision, and follows its inspection. */
  show(model: ModelResponse): void {
    this._model.set(model);
    this.openings.next(model.id);
  }

  async cancelInspection(): Promise<void> {
    const model = this.model();
    if (!model) return;
    this._isCancelling.set(true);
    try {
      await this.jobs.cancel(model.revision.job.id);
    } catch (failure) {
      this._isCancelling.set(false);
      throw failure;
    }
  }

  async remove(): Promise<void> {
    const model = this.model();
    if (model) await this.api.remove(model.id);
  }

  private follow(id: string) {
    const load = defer(() => from(this.api.get(id))).pipe(tap((model) => this._model.set(model)));
    this._problem.set('');
    this._isCancelling.set(false);
    return load.pipe(
      switchMap((model) =>
        isInspecting(model) ? concat(this.followJob(model.revision.job.id), load) : EMPTY,
      ),
      catchError((failure: unknown) => {
        this._problem.set(sentenceFor(failure));
        return EMPTY;
      }),
    );
  }

  private followJob(jobId: string) {
    return this.watcher
      .watch(jobId)
      .pipe(
        tap((job) =>
          this._model.update(
            (model) => model && { ...model, revision: { ...model.revision, job } },
          ),
        ),
      );
  }
}
