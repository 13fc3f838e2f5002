import { Injectable, inject, signal } from '@angular/core';
import { type Subscription } from 'rxjs';
import { type ModelResponse, type RevisionSummary } from '../../../shared/api/models.contract.js';
import { sentenceFor } from '../core/http/api-failure';
import { ModelsApi } from './models-api';
import { checkBeforeSending } from './upload-checks';

/** The revisions of the model on the page, and the upload of the next one. */
@Injectable()
export class RevisionDesk {
  private readonly api = inject(ModelsApi);
  private readonly _revisions = signal<readonly RevisionSummary[]>([]);
  private readonly _fraction = signal<number | null>(null);
  private readonly _problem = signal('');
  private sending: Subscription | null = null;

  /** The newest first. */
  readonly revisions = this._revisions.asReadonly();
  /** Share of the file that is sent; null while nothing is. */
  readonly fraction = this._fraction.asReadonly();
  /** Why a file was not taken, as a sentence; else empty. */
  readonly problem = this._problem.asReadonly();

  async load(modelId: string): Promise<void> {
    try {
      this._revisions.set(await this.api.revisions(modelId));
    } catch (failure) {
      // Expected: the model is gone, or the server cannot be reached; the page says so itself.
      this._problem.set(sentenceFor(failure));
    }
  }

  /** Sends a file as the next revision; `onStored` gets the model with it. */
  upload(modelId: string, file: File, onStored: (model: ModelResponse) => void): void {
    const refusal = checkBeforeSending(file);
    this._problem.set(refusal ?? '');
    if (refusal || this.sending) return;
    this._fraction.set(0);
    this.sending = this.api.uploadRevision(modelId, file).subscribe({
      next: (step) => {
        if (step.kind === 'sent') this._fraction.set(step.fraction);
        else onStored(step.model);
      },
      error: (failure: unknown) => {
        this._problem.set(sentenceFor(failure));
        this.end();
      },
      complete: () => this.end(),
    });
  }

  cancel(): void {
    this.sending?.unsubscribe();
    this.end();
  }

  private end(): void {
    this.sending = null;
    this._fraction.set(null);
  }
}
