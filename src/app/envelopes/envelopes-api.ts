import { HttpClient } from '@angular/common/http';
import { Injectable, inject } from '@angular/core';
import { firstValueFrom } from 'rxjs';
import {
  envelopeListResponse,
  envelopeResponse,
  type EnvelopeRequest,
  type EnvelopeResponse,
} from '../../../shared/api/envelopes.contract.js';
import { parseAnswer } from '../core/http/parse-answer';

/** The envelopes' end points. */
@Injectable({ providedIn: 'root' })
export class EnvelopesApi {
  private readonly http = inject(HttpClient);

  async list(): Promise<readonly EnvelopeResponse[]> {
    const answer = this.http.get('/api/envelopes').pipe(parseAnswer(envelopeListResponse));
    return (await firstValueFrom(answer)).envelopes;
  }

  get(id: string): Promise<EnvelopeResponse> {
    return firstValueFrom(
      this.http.get(`/api/envelopes/${id}`).pipe(parseAnswer(envelopeResponse)),
    );
  }

  create(request: EnvelopeRequest): Promise<EnvelopeResponse> {
    return firstValueFrom(
      this.http.post('/api/envelopes', request).pipe(parseAnswer(envelopeResponse)),
    );
  }

  replace(id: string, request: EnvelopeRequest): Promise<EnvelopeResponse> {
    return firstValueFrom(
      this.http.put(`/api/envelopes/${id}`, request).pipe(parseAnswer(envelopeResponse)),
    );
  }

  async remove(id: string): Promise<void> {
    await firstValueFrom(this.http.delete(`/api/envelopes/${id}`));
  }
}
