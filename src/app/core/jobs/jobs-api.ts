import { HttpClient } from '@angular/common/http';
import { Injectable, inject } from '@angular/core';
import { firstValueFrom, type Observable } from 'rxjs';
import { jobResponse, type JobResponse } from '../../../../shared/api/jobs.contract.js';
import { parseAnswer } from '../http/parse-answer';

/** The jobs' end points, apart from the event stream. */
@Injectable({ providedIn: 'root' })
export class JobsApi {
  private readonly http = inject(HttpClient);

  job(id: string): Observable<JobResponse> {
    return this.http.get(`/api/jobs/${id}`).pipe(parseAnswer(jobResponse));
  }

  /** Asks the job to end with the best it has. */
  async enough(id: string): Promise<void> {
    await firstValueFrom(this.http.post(`/api/jobs/${id}/enough`, {}));
  }

  async cancel(id: string): Promise<void> {
    await firstValueFrom(this.http.post(`/api/jobs/${id}/cancel`, {}));
  }
}
