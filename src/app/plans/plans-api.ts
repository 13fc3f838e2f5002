import { HttpClient } from '@angular/common/http';
import { Injectable, inject } from '@angular/core';
import { firstValueFrom } from 'rxjs';
import {
  planListResponse,
  planResponse,
  type PlanRequest,
  type PlanResponse,
  type PlanSummary,
} from '../../../shared/api/plans.contract.js';
import { parseAnswer } from '../core/http/parse-answer';

/** The plans' end points. */
@Injectable({ providedIn: 'root' })
export class PlansApi {
  private readonly http = inject(HttpClient);

  async list(modelId?: string): Promise<readonly PlanSummary[]> {
    const params = modelId ? { modelId } : undefined;
    const answer = await firstValueFrom(
      this.http.get('/api/plans', { params }).pipe(parseAnswer(planListResponse)),
    );
    return answer.plans;
  }

  plan(id: string): Promise<PlanResponse> {
    return firstValueFrom(this.http.get(`/api/plans/${id}`).pipe(parseAnswer(planResponse)));
  }

  make(request: PlanRequest): Promise<PlanResponse> {
    return firstValueFrom(this.http.post('/api/plans', request).pipe(parseAnswer(planResponse)));
  }

  /** Records that the files are wanted although a check failed. */
  release(id: string, reason: string): Promise<PlanResponse> {
    return firstValueFrom(
      this.http.post(`/api/plans/${id}/release`, { reason }).pipe(parseAnswer(planResponse)),
    );
  }

  async remove(id: string): Promise<void> {
    await firstValueFrom(this.http.delete(`/api/plans/${id}`));
  }

  /** Where the browser fetches the ZIP by itself, streamed. */
  downloadUrl(id: string): string {
    return `/api/plans/${id}/download`;
  }
}
