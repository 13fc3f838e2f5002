import { HttpClient } from '@angular/common/http';
import { Injectable, inject } from '@angular/core';
import { firstValueFrom } from 'rxjs';
import {
  envelopeListResponse,
  type EnvelopeResponse,
} from '../../../shared/api/envelopes.contract.js';
import {
  planListResponse,
  planResponse,
  type PlanRequest,
  type PlanResponse,
  type PlanSummary,
} from '../../../shared/api/plans.contract.js';
import {
  materialListResponse,
  type MaterialResponse,
} from '../../../shared/api/materials.contract.js';
import { parseAnswer } from '../core/http/parse-answer';

/** What a model's page needs to order a plan: the envelopes to choose from and the plans there are. */
@Injectable({ providedIn: 'root' })
export class PlanOrdersApi {
  private readonly http = inject(HttpClient);

  async envelopes(): Promise<readonly EnvelopeResponse[]> {
    const answer = this.http.get('/api/envelopes').pipe(parseAnswer(envelopeListResponse));
    return (await firstValueFrom(answer)).envelopes;
  }

  async materials(): Promise<readonly MaterialResponse[]> {
    const answer = this.http.get('/api/materials').pipe(parseAnswer(materialListResponse));
    return (await firstValueFrom(answer)).materials;
  }

  async plans(modelId: string): Promise<readonly PlanSummary[]> {
    const answer = this.http
      .get('/api/plans', { params: { modelId } })
      .pipe(parseAnswer(planListResponse));
    return (await firstValueFrom(answer)).plans;
  }

  order(request: PlanRequest): Promise<PlanResponse> {
    return firstValueFrom(this.http.post('/api/plans', request).pipe(parseAnswer(planResponse)));
  }
}
