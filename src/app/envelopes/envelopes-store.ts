import { Injectable, computed, inject, signal } from '@angular/core';
import {
  type EnvelopeRequest,
  type EnvelopeResponse,
} from '../../../shared/api/envelopes.contract.js';
import { sentenceFor } from '../core/http/api-failure';
import { EnvelopesApi } from './envelopes-api';

/** The workshop's envelopes while their pages are open. Writes pass the server's refusal on. */
@Injectable()
export class EnvelopesStore {
  private readonly api = inject(EnvelopesApi);
  private readonly _envelopes = signal<readonly EnvelopeResponse[] | null>(null);
  private readonly _problem = signal('');

  /** Null until loaded. */
  readonly envelopes = this._envelopes.asReadonly();
  /** Why the list could not be loaded, as a sentence; else empty. */
  readonly problem = this._problem.asReadonly();
  readonly isEmpty = computed(() => this.envelopes()?.length === 0);

  async load(): Promise<void> {
    this._problem.set('');
    try {
      this._envelopes.set(byName(await this.api.list()));
    } catch (failure) {
      // Expected without a server or a session; shown where the list would be.
      this._problem.set(sentenceFor(failure));
    }
  }

  async create(request: EnvelopeRequest): Promise<void> {
    const made = await this.api.create(request);
    this._envelopes.update((list) => list && byName([...list, made]));
  }

  async replace(id: string, request: EnvelopeRequest): Promise<void> {
    const changed = await this.api.replace(id, request);
    this._envelopes.update(
      (list) => list && byName(list.map((envelope) => (envelope.id === id ? changed : envelope))),
    );
  }

  async remove(id: string): Promise<void> {
    await this.api.remove(id);
    this._envelopes.update((list) => list && list.filter((envelope) => envelope.id !== id));
  }
}

function byName(list: readonly EnvelopeResponse[]): readonly EnvelopeResponse[] {
  return [...list].sort((a, b) => a.name.localeCompare(b.name));
}
