import { HttpClient, HttpEventType, type HttpEvent } from '@angular/common/http';
import { Injectable, inject } from '@angular/core';
import { EMPTY, firstValueFrom, of, switchMap, type Observable } from 'rxjs';
import {
  modelListResponse,
  modelResponse,
  revisionListResponse,
  type ModelPatchRequest,
  type ModelResponse,
  type RevisionSummary,
} from '../../../shared/api/models.contract.js';
import { type MendingChoices } from '../../../shared/jobs/mending-choices.js';
import { parseAnswer } from '../core/http/parse-answer';

/** What an upload reports on its way. */
export type UploadStep =
  | { readonly kind: 'sent'; readonly fraction: number }
  | { readonly kind: 'stored'; readonly model: ModelResponse };

/** The models' end points. */
@Injectable({ providedIn: 'root' })
export class ModelsApi {
  private readonly http = inject(HttpClient);

  async list(): Promise<readonly ModelResponse[]> {
    const answer = this.http.get('/api/models').pipe(parseAnswer(modelListResponse));
    return (await firstValueFrom(answer)).models;
  }

  get(id: string): Promise<ModelResponse> {
    return firstValueFrom(this.http.get(`/api/models/${id}`).pipe(parseAnswer(modelResponse)));
  }

  change(id: string, request: ModelPatchRequest): Promise<ModelResponse> {
    return firstValueFrom(
      this.http.patch(`/api/models/${id}`, request).pipe(parseAnswer(modelResponse)),
    );
  }

  /** Inspects the newest revision again with other choices. */
  mend(id: string, choices: MendingChoices): Promise<ModelResponse> {
    return firstValueFrom(
      this.http.post(`/api/models/${id}/mending`, { choices }).pipe(parseAnswer(modelResponse)),
    );
  }

  /** The newest first. */
  async revisions(id: string): Promise<readonly RevisionSummary[]> {
    const answer = this.http
      .get(`/api/models/${id}/revisions`)
      .pipe(parseAnswer(revisionListResponse));
    return (await firstValueFrom(answer)).revisions;
  }

  async remove(id: string): Promise<void> {
    await firstValueFrom(this.http.delete(`/api/models/${id}`));
  }

  /** Sends a file; unsubscribing stops it on the wire. */
  upload(file: File): Observable<UploadStep> {
    return this.send('/api/models', file);
  }

  /** Sends a file as the next revision of a model; unsubscribing stops it on the wire. */
  uploadRevision(id: string, file: File): Observable<UploadStep> {
    return this.send(`/api/models/${id}/revisions`, file);
  }

  private send(address: string, file: File): Observable<UploadStep> {
    const body = new FormData();
    body.append('file', file, file.name);
    return this.http
      .post(address, body, { reportProgress: true, observe: 'events' })
      .pipe(switchMap((event) => readUploadEvent(event)));
  }
}

function readUploadEvent(event: HttpEvent<unknown>): Observable<UploadStep> {
  if (event.type === HttpEventType.UploadProgress) {
    return of({ kind: 'sent', fraction: event.total ? event.loaded / event.total : 0 });
  }
  if (event.type !== HttpEventType.Response) return EMPTY;
  return of(event.body).pipe(
    parseAnswer(modelResponse),
    switchMap((model) => of<UploadStep>({ kind: 'stored', model })),
  );
}
