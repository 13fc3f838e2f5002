import { TestBed } from '@angular/core/testing';
import { of, throwError, type Observable } from 'rxjs';
import { type JobResponse } from '../../../../shared/api/jobs.contract.js';
import { ApiFailure } from '../http/api-failure';
import { OPEN_EVENT_STREAM, type EventStream } from './event-source';
import { JobWatcher, pausesMs, silenceMs } from './job-watcher';
import { JobsApi } from './jobs-api';

const id = 'j'.repeat(20);
const at = (fraction: number, state: JobResponse['state'] = 'running'): JobResponse => ({
  id,
  kind: 'plan.make',
  state,
  stage: 'Cutting',
  fraction,
  error: null,
});

/** An event stream that the test plays. */
class PlayedStream implements EventStream {
  private readonly listeners = new Map<string, (event: Event) => void>();
  isClosed = false;
  addEventListener(type: string, listener: unknown): void {
    this.listeners.set(type, listener as (event: Event) => void);
  }
  close(): void {
    this.isClosed = true;
  }
  say(data: string): void {
    this.listeners.get('job')?.(new MessageEvent('job', { data }));
  }
  send(job: JobResponse): void {
    this.say(JSON.stringify(job));
  }
  lose(): void {
    this.listeners.get('error')?.(new Event('error'));
  }
}

function setUp(ask: () => Observable<JobResponse> = () => of(at(0.5))) {
  vi.useFakeTimers();
  const streams: PlayedStream[] = [];
  const job = vi.fn(ask);
  TestBed.configureTestingModule({
    providers: [
      { provide: JobsApi, useValue: { job } },
      {
        provide: OPEN_EVENT_STREAM,
        useValue: () => {
          const stream = new PlayedStream();
          streams.push(stream);
          return stream;
        },
      },
    ],
  });
  const seen: JobResponse[] = [];
  let end: unknown = null;
  const subscription = TestBed.inject(JobWatcher)
    .watch(id)
    .subscribe({
      next: (value) => seen.push(value),
      error: (failure: unknown) => (end = failure),
      complete: () => (end = 'complete'),
    });
  const latest = () => streams[streams.length - 1] as PlayedStream;
  return { streams, latest, seen, job, subscription, end: () => end };
}

describe('JobWatcher', () => {
  afterEach(() => vi.useRealTimers());

  it('passes every change on and completes after the final state', () => {
    const { latest, seen, streams, end } = setUp();
    latest().send(at(0.1));
    latest().send(at(0.6));
    latest().send(at(1, 'done'));
    expect(seen.map((one) => one.fraction)).toEqual([0.1, 0.6, 1]);
    expect(end()).toBe('complete');
    expect(streams).toHaveLength(1);
    expect(latest().isClosed).toBe(true);
  });

  it('asks once and opens the stream again when it is lost', () => {
    const { latest, seen, streams, job } = setUp();
    latest().send(at(0.1));
    latest().lose();
    expect(job).toHaveBeenCalledTimes(1);
    expect(streams).toHaveLength(1);
    vi.advanceTimersByTime(pausesMs[0] as number);
    expect(streams).toHaveLength(2);
    latest().send(at(0.7));
    expect(seen.map((one) => one.fraction)).toEqual([0.1, 0.5, 0.7]);
  });

  it('goes on by plain requests where no stream comes through at all', () => {
    const answers = [at(0.2), at(0.4), at(1, 'done')];
    const { latest, seen, end } = setUp(() => of(answers.shift() as JobResponse));
    for (let tries = 0; tries < 3; tries++) {
      latest().lose();
      vi.advanceTimersByTime(5_000);
    }
    expect(seen.map((one) => one.fraction)).toEqual([0.2, 0.4, 1]);
    expect(end()).toBe('complete');
  });

  it('asks when the stream stays silent, as behind a proxy that holds it back', () => {
    const { seen, job } = setUp();
    vi.advanceTimersByTime(silenceMs.first);
    expect(job).toHaveBeenCalledTimes(1);
    expect(seen).toEqual([at(0.5)]);
  });

  it('waits longer from loss to loss and starts over after a word from the stream', () => {
    const { latest, streams } = setUp();
    latest().lose();
    vi.advanceTimersByTime(pausesMs[0] as number);
    latest().lose();
    vi.advanceTimersByTime(pausesMs[0] as number);
    expect(streams).toHaveLength(2);
    vi.advanceTimersByTime(pausesMs[1] as number);
    expect(streams).toHaveLength(3);
    latest().send(at(0.6));
    latest().lose();
    vi.advanceTimersByTime(pausesMs[0] as number);
    expect(streams).toHaveLength(4);
  });

  it('outlasts a server that is away', () => {
    const away = new ApiFailure('network.unreachable', 'Unreachable.', 0);
    const { latest, seen, end } = setUp(() => throwError(() => away));
    for (let tries = 0; tries < 5; tries++) {
      latest().lose();
      vi.advanceTimersByTime(5_000);
    }
    expect(end()).toBeNull();
    latest().send(at(1, 'done'));
    expect(seen).toEqual([at(1, 'done')]);
    expect(end()).toBe('complete');
  });

  it.each([401, 403, 404])('gives up when the server refuses to show the job with %i', (status) => {
    const refusal = new ApiFailure('job.notFound', 'No such job.', status);
    const { latest, end } = setUp(() => throwError(() => refusal));
    latest().lose();
    expect(end()).toBe(refusal);
  });

  it.each(['{', '{"id":"x"}'])('takes a broken event %j for a lost stream', (data) => {
    const { latest, job } = setUp();
    latest().say(data);
    expect(job).toHaveBeenCalledTimes(1);
  });

  it('closes the stream when nobody watches any more', () => {
    const { latest, subscription } = setUp();
    subscription.unsubscribe();
    expect(latest().isClosed).toBe(true);
  });
});
