import { Injectable, inject, signal } from '@angular/core';
import { type PlanSummary } from '../../../../shared/api/plans.contract.js';
import { sentenceFor } from '../../core/http/api-failure';
import { PlansApi } from '../plans-api';

/** The list of plans while its page is open. */
@Injectable()
export class PlanListStore {
  private readonly api = inject(PlansApi);
  private readonly _plans = signal<readonly PlanSummary[]>([]);
  private readonly _isLoading = signal(true);
  private readonly _failure = signal('');

  readonly plans = this._plans.asReadonly();
  readonly isLoading = this._isLoading.asReadonly();
  readonly failure = this._failure.asReadonly();

  async load(modelId?: string): Promise<void> {
    this._isLoading.set(true);
    this._failure.set('');
    try {
      this._plans.set(await this.api.list(modelId));
    } catch (error) {
      // Expected: the server refuses or cannot be reached.
      this._failure.set(sentenceFor(error));
    } finally {
      this._isLoading.set(false);
    }
  }
}
