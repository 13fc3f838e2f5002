import { HttpClient } from '@angular/common/http';
import { Injectable, inject } from '@angular/core';
import { firstValueFrom } from 'rxjs';
import {
  materialListResponse,
  materialResponse,
  type MaterialRequest,
  type MaterialResponse,
} from '../../../shared/api/materials.contract.js';
import { parseAnswer } from '../core/http/parse-answer';

/** The materials' end points. */
@Injectable({ providedIn: 'root' })
export class MaterialsApi {
  private readonly http = inject(HttpClient);

  async list(): Promise<readonly MaterialResponse[]> {
    const answer = this.http.get('/api/materials').pipe(parseAnswer(materialListResponse));
    return (await firstValueFrom(answer)).materials;
  }

  get(id: string): Promise<MaterialResponse> {
    return firstValueFrom(
      this.http.get(`/api/materials/${id}`).pipe(parseAnswer(materialResponse)),
    );
  }

  create(request: MaterialRequest): Promise<MaterialResponse> {
    return firstValueFrom(
      this.http.post('/api/materials', request).pipe(parseAnswer(materialResponse)),
    );
  }

  replace(id: string, request: MaterialRequest): Promise<MaterialResponse> {
    return firstValueFrom(
      this.http.put(`/api/materials/${id}`, request).pipe(parseAnswer(materialResponse)),
    );
  }

  async remove(id: string): Promise<void> {
    await firstValueFrom(this.http.delete(`/api/materials/${id}`));
  }
}
