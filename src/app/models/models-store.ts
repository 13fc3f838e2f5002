import { Injectable, computed, inject, signal } from '@angular/core';
import { takeUntilDestroyed, toObservable } from '@angular/core/rxjs-interop';
import { EMPTY, interval, switchMap } from 'rxjs';
import { type ModelResponse } from '../../../shared/api/models.contract.js';
import { sentenceFor } from '../core/http/api-failure';
import { isInspecting } from './model-state';
import { ModelsApi } from './models-api';
import { UploadQueue } from './upload-queue';

/** While models are being inspected the list is asked for this often, ms. */
export const lookAgainMs = 1_500;

/**
 * The workshop's models. Rows under inspection are followed by asking for the list: a browser opens
 * only six streams to one server, and a list may hold many more models than that.
 */
@Injectable()
export class ModelsStore {
  private readonly api = inject(ModelsApi);
  private readonly _models = signal<readonly ModelResponse[] | null>(null);
  private readonly _problem = signal('');
  private readonly _query = signal('');

  /** Null until loaded; newest first. */
  readonly models = this._models.asReadonly();
  readonly problem = this._problem.asReadonly();
  readonly isEmpty = computed(() => this.models()?.length === 0);
  readonly found = computed(() => {
    const query = this._query();
    const models = this.models();
    return models && models.filter((model) => matches(model, query));
  });
  private readonly isWaiting = computed(() => this.models()?.some(isInspecting) ?? false);

  constructor() {
    inject(UploadQueue)
      .stored$.pipe(takeUntilDestroyed())
      .subscribe((model) => this._models.update((models) => models && [model, ...models]));
    toObservable(this.isWaiting)
      .pipe(
        switchMap((isWaiting) => (isWaiting ? interval(lookAgainMs) : EMPTY)),
        switchMap(() => this.lookAgain()),
        takeUntilDestroyed(),
      )
      .subscribe();
  }

  search(query: string): void {
    this._query.set(query);
  }

  async load(): Promise<void> {
    this._problem.set('');
    try {
      this._models.set(newestFirst(await this.api.list()));
    } catch (failure) {
      // Expected without a server or a session; shown where the list would be.
      this._problem.set(sentenceFor(failure));
    }
  }

  async remove(id: string): Promise<void> {
    await this.api.remove(id);
    this._models.update((models) => models && models.filter((model) => model.id !== id));
  }

  private async lookAgain(): Promise<void> {
    try {
      this._models.set(newestFirst(await this.api.list()));
    } catch {
      // Expected when the server is away for a moment: what is on the page stays, the next look tells.
    }
  }
}

function newestFirst(models: readonly ModelResponse[]): readonly ModelResponse[] {
  return [...models].sort((a, b) => b.createdAt.localeCompare(a.createdAt));
}

/** Every word of the query must be in the model's name or its file's name. */
function matches(model: ModelResponse, query: string): boolean {
  const text = `${model.name} ${model.revision.fileName}`.toLocaleLowerCase();
  return query
    .toLocaleLowerCase()
    .split(/\s+/)
    .every((word) => text.includes(word));
}
