import { DOCUMENT, Injectable, computed, effect, inject, signal } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { Subject, fromEvent, type Subscription } from 'rxjs';
import { type ModelResponse } from '../../../shared/api/models.contract.js';
import { SessionStore } from '../core/auth/session-store';
import { sentenceFor } from '../core/http/api-failure';
import { ModelsApi, type UploadStep } from './models-api';
import { checkBeforeSending } from './upload-checks';

export interface Upload {
  readonly id: number;
  readonly file: File;
  /** `storing`: everything is sent and the server has not answered yet. */
  readonly state: 'waiting' | 'sending' | 'storing' | 'done' | 'refused' | 'cancelled';
  readonly fraction: number;
  /** Why it was refused, as a sentence. */
  readonly problem: string;
  readonly model: ModelResponse | null;
}

/**
 * Files on their way to the server, one after another. Lives as long as the app, so that a long
 * upload goes on while the person looks at other pages.
 */
@Injectable({ providedIn: 'root' })
export class UploadQueue {
  private readonly api = inject(ModelsApi);
  private readonly sessions = inject(SessionStore);
  private readonly _uploads = signal<readonly Upload[]>([]);
  private readonly _stored = new Subject<ModelResponse>();
  private current: { readonly id: number; readonly sending: Subscription } | null = null;
  private lastId = 0;

  readonly uploads = this._uploads.asReadonly();
  readonly stored$ = this._stored.asObservable();
  readonly isBusy = computed(() => this.uploads().some((upload) => isOnItsWay(upload)));

  constructor() {
    effect(() => {
      if (!this.sessions.isSignedIn()) this.clear();
    });
    const view = inject(DOCUMENT).defaultView ?? window;
    fromEvent(view, 'beforeunload')
      .pipe(takeUntilDestroyed())
      .subscribe((event) => {
        // The browser asks in its own words whether to leave.
        if (this.isBusy()) event.preventDefault();
      });
  }

  add(files: readonly File[]): void {
    const added = files.map((file): Upload => {
      const problem = checkBeforeSending(file) ?? '';
      const state = problem ? 'refused' : 'waiting';
      return { id: ++this.lastId, file, state, fraction: 0, problem, model: null };
    });
    this._uploads.update((uploads) => [...uploads, ...added]);
    this.sendNext();
  }

  cancel(id: number): void {
    this.change(id, (upload) => (isOnItsWay(upload) ? { ...upload, state: 'cancelled' } : upload));
    if (this.current?.id === id) this.stopCurrent();
    this.sendNext();
  }

  /** Puts a refused or cancelled file at the end of the queue again. */
  tryAgain(id: number): void {
    const upload = this.uploads().find((one) => one.id === id);
    if (!upload) return;
    this.dismiss(id);
    this.add([upload.file]);
  }

  /** Takes a finished line off the list. */
  dismiss(id: number): void {
    this._uploads.update((uploads) =>
      uploads.filter((upload) => upload.id !== id || isOnItsWay(upload)),
    );
  }

  /** Takes every finished line off the list. */
  dismissFinished(): void {
    this._uploads.update((uploads) => uploads.filter(isOnItsWay));
  }

  private clear(): void {
    this.stopCurrent();
    this._uploads.set([]);
  }

  private stopCurrent(): void {
    this.current?.sending.unsubscribe();
    this.current = null;
  }

  private sendNext(): void {
    const next = this.uploads().find((upload) => upload.state === 'waiting');
    if (this.current || !next) return;
    this.change(next.id, (upload) => ({ ...upload, state: 'sending' }));
    const sending = this.api.upload(next.file).subscribe({
      next: (step) => this.take(next.id, step),
      error: (failure: unknown) => {
        const problem = sentenceFor(failure);
        this.change(next.id, (upload) => ({ ...upload, state: 'refused', problem }));
        this.goOn();
      },
      complete: () => this.goOn(),
    });
    // Already over when the answer came at once.
    this.current = sending.closed ? null : { id: next.id, sending };
    if (sending.closed) this.sendNext();
  }

  private goOn(): void {
    if (!this.current) return;
    this.current = null;
    this.sendNext();
  }

  private take(id: number, step: UploadStep): void {
    if (step.kind === 'sent') {
      const state = step.fraction < 1 ? 'sending' : 'storing';
      this.change(id, (upload) => ({ ...upload, state, fraction: step.fraction }));
      return;
    }
    this.change(id, (upload) => ({ ...upload, state: 'done', fraction: 1, model: step.model }));
    this._stored.next(step.model);
  }

  private change(id: number, how: (upload: Upload) => Upload): void {
    this._uploads.update((uploads) =>
      uploads.map((upload) => (upload.id === id ? how(upload) : upload)),
    );
  }
}

function isOnItsWay(upload: Upload): boolean {
  return upload.state === 'waiting' || upload.state === 'sending' || upload.state === 'storing';
}
