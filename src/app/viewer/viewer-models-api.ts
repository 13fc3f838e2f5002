import { HttpClient } from '@angular/common/http';
import { Injectable, inject } from '@angular/core';
import { firstValueFrom } from 'rxjs';
import {
  envelopeListResponse,
  type EnvelopeResponse,
} from '../../../shared/api/envelopes.contract.js';
import { modelResponse, type ModelResponse } from '../../../shared/api/models.contract.js';
import { parseAnswer } from '../core/http/parse-answer';

/** What the viewer's own pages read about models and envelopes. */
@Injectable({ providedIn: 'root' })
export class ViewerModelsApi {
  private readonly http = inject(HttpClient);

  model(id: string): Promise<ModelResponse> {
    return firstValueFrom(this.http.get(`/api/models/${id}`).pipe(parseAnswer(modelResponse)));
  }

  async envelopes(): Promise<readonly EnvelopeResponse[]> {
    const answer = await firstValueFrom(
      this.http.get('/api/envelopes').pipe(parseAnswer(envelopeListResponse)),
    );
    return answer.envelopes;
  }
}
