import { Injectable, inject, signal } from '@angular/core';
import { sentenceFor } from '../../core/http/api-failure';
import { type Triple, type ViewParts } from '../scene/view-parts';
import { ViewFiles } from '../view-files';
import { ViewerModelsApi } from '../viewer-models-api';

/** A model's picture file and, where the page does not know it, the size to draw it in. */
@Injectable()
export class ModelViewStore {
  private readonly files = inject(ViewFiles);
  private readonly models = inject(ViewerModelsApi);
  private readonly _parts = signal<ViewParts | null>(null);
  private readonly _sizeMm = signal<Triple | null>(null);
  private readonly _isLoading = signal(true);
  private readonly _failure = signal('');
  private openId = '';

  readonly parts = this._parts.asReadonly();
  readonly sizeMm = this._sizeMm.asReadonly();
  readonly isLoading = this._isLoading.asReadonly();
  /** Why there is no picture; empty otherwise. */
  readonly failure = this._failure.asReadonly();

  /** @param asksSize whether the model's size has to be asked for */
  async open(modelId: string, asksSize: boolean): Promise<void> {
    this.openId = modelId;
    this._isLoading.set(true);
    this._failure.set('');
    this._parts.set(null);
    try {
      const [parts, model] = await Promise.all([
        this.files.modelView(modelId),
        asksSize ? this.models.model(modelId) : null,
      ]);
      if (this.openId !== modelId) return;
      this._parts.set(parts);
      this._sizeMm.set(model?.revision.sizeMm ?? null);
    } catch (error) {
      // Expected: there is no picture, or the server cannot be reached.
      if (this.openId === modelId) this._failure.set(sentenceFor(error));
    } finally {
      if (this.openId === modelId) this._isLoading.set(false);
    }
  }
}
