import { Injectable, inject } from '@angular/core';
import {
  EMPTY,
  Observable,
  catchError,
  concat,
  defer,
  retry,
  takeWhile,
  tap,
  throwError,
  timeout,
  timer,
} from 'rxjs';
import { jobResponse, type JobResponse } from '../../../../shared/api/jobs.contract.js';
import { isFinal } from '../../../../shared/jobs/job-map.js';
import { ApiFailure } from '../http/api-failure';
import { OPEN_EVENT_STREAM } from './event-source';
import { JobsApi } from './jobs-api';

/** Pause before the stream is tried again, ms; the job is asked for once before every pause. */
export const pausesMs: readonly number[] = [500, 1_000, 2_000, 3_000];

/** A stream that says nothing for so long is held back or lost somewhere on the way, ms. */
export const silenceMs = { first: 5_000, each: 30_000 } as const;

/** Follows a job until it is over. */
@Injectable({ providedIn: 'root' })
export class JobWatcher {
  private readonly api = inject(JobsApi);
  private readonly openStream = inject(OPEN_EVENT_STREAM);

  /**
   * Emits the job whenever it changes and completes after its final state. A lost event stream is
   * opened again; meanwhile, and where no stream comes through at all, the job is asked for by plain
   * requests. Fails only when the server refuses to show the job.
   */
  watch(jobId: string): Observable<JobResponse> {
    return defer(() => {
      let losses = 0;
      return this.stream(jobId).pipe(
        timeout(silenceMs),
        tap(() => (losses = 0)),
        catchError(() =>
          concat(
            this.askOnce(jobId),
            throwError(() => new StreamLost()),
          ),
        ),
        retry({
          delay: (error: unknown) => {
            if (!(error instanceof StreamLost)) return throwError(() => error);
            return timer(pausesMs[Math.min(losses++, pausesMs.length - 1)] ?? 0);
          },
        }),
        takeWhile((job) => !isFinal(job.state), true),
      );
    });
  }

  private stream(jobId: string): Observable<JobResponse> {
    return new Observable((subscriber) => {
      const stream = this.openStream(`/api/jobs/${jobId}/events`);
      stream.addEventListener('job', (event) => {
        const job = jobResponse.safeParse(readJson((event as MessageEvent<string>).data));
        if (job.success) subscriber.next(job.data);
        else subscriber.error(new StreamLost());
      });
      stream.addEventListener('error', () => subscriber.error(new StreamLost()));
      return () => stream.close();
    });
  }

  private askOnce(jobId: string): Observable<JobResponse> {
    return this.api.job(jobId).pipe(
      catchError((failure: unknown) => {
        const isRefusal = failure instanceof ApiFailure && [401, 403, 404].includes(failure.status);
        return isRefusal ? throwError(() => failure) : EMPTY;
      }),
    );
  }
}

class StreamLost extends Error {}

function readJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    // Expected when a proxy cuts an event in two; the caller then asks for the whole job.
    return null;
  }
}
