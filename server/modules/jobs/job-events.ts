import type { Response } from 'express';
import type { JobResponse } from '../../../shared/api/jobs.contract.js';
import { isFinal } from '../../../shared/jobs/job-map.js';
import type { JobMonitor } from './job-monitor.js';

const HEARTBEAT_MS = 15_000;
const RECONNECT_AFTER_MS = 2_000;

/**
 * Streams a job's changes as server-sent events (WHATWG HTML, section 9.2) until it is final, the
 * person goes away, or may no longer see it.
 */
export function streamJobEvents({
  res,
  job,
  monitor,
  mayStillSee,
  heartbeatMs = HEARTBEAT_MS,
}: {
  res: Response;
  job: JobResponse;
  monitor: JobMonitor;
  mayStillSee: () => Promise<boolean>;
  heartbeatMs?: number;
}): void {
  res.writeHead(200, {
    'Content-Type': 'text/event-stream; charset=utf-8',
    'Cache-Control': 'no-cache, no-transform',
    'X-Accel-Buffering': 'no',
  });
  res.write(`retry: ${RECONNECT_AFTER_MS}\n\n`);

  const unsubscribe = monitor.subscribe(job.id, (changed) => {
    if (changed) send(changed);
    if (!changed || isFinal(changed.state)) res.end();
  });
  const heartbeat = setInterval(() => {
    res.write(': still here\n\n');
    mayStillSee().then(
      (may) => may || res.end(),
      // The database is away: the next heartbeat asks again.
      () => undefined,
    );
  }, heartbeatMs);
  res.once('close', () => {
    clearInterval(heartbeat);
    unsubscribe();
  });

  function send(value: JobResponse): void {
    // A slow reader misses steps in between, never the last one.
    if (res.writableNeedDrain && !isFinal(value.state)) return;
    res.write(`event: job\ndata: ${JSON.stringify(value)}\n\n`);
  }
}
