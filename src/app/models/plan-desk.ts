import { Injectable, computed, inject, signal } from '@angular/core';
import { type EnvelopeResponse } from '../../../shared/api/envelopes.contract.js';
import { type MaterialResponse } from '../../../shared/api/materials.contract.js';
import { type PlanRequest, type PlanSummary } from '../../../shared/api/plans.contract.js';
import { sentenceFor } from '../core/http/api-failure';
import { PlanOrdersApi } from './plan-orders-api';

/** Where plans of one model are looked up and ordered. */
@Injectable()
export class PlanDesk {
  private readonly api = inject(PlanOrdersApi);
  private readonly _plans = signal<readonly PlanSummary[] | null>(null);
  private readonly _envelopes = signal<readonly EnvelopeResponse[] | null>(null);
  private readonly _materials = signal<readonly MaterialResponse[]>([]);
  private readonly _problem = signal('');
  private readonly _isOrdering = signal(false);

  /** Null until loaded, as are the envelopes. */
  readonly plans = this._plans.asReadonly();
  readonly envelopes = this._envelopes.asReadonly();
  readonly materials = this._materials.asReadonly();
  readonly problem = this._problem.asReadonly();
  readonly isOrdering = this._isOrdering.asReadonly();
  /** The envelope of the latest plan: most likely the one that is wanted again. */
  readonly suggestedEnvelopeId = computed(() => {
    const latest = [...(this.plans() ?? [])].sort((a, b) => b.number - a.number)[0];
    return latest?.envelope.id ?? null;
  });

  async load(modelId: string): Promise<void> {
    this._problem.set('');
    try {
      const [plans, envelopes, materials] = await Promise.all([
        this.api.plans(modelId),
        this.api.envelopes(),
        this.api.materials(),
      ]);
      this._materials.set(materials);
      this._plans.set(plans);
      this._envelopes.set(envelopes);
    } catch (failure) {
      // Expected for an old address or without a server; the page says it once.
      this._problem.set(sentenceFor(failure));
    }
  }

  /** The new plan's id, or null when it was refused; `problem` then says why. */
  async order(request: PlanRequest): Promise<string | null> {
    this._problem.set('');
    this._isOrdering.set(true);
    try {
      return (await this.api.order(request)).id;
    } catch (failure) {
      // Expected: the model is not ready, the envelope was removed meanwhile, no server.
      this._problem.set(sentenceFor(failure));
      return null;
    } finally {
      this._isOrdering.set(false);
    }
  }
}
