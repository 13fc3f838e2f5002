import { createPool } from 'mysql2/promise';
import { pino } from 'pino';
import { createJobQueue } from './runtime/job-queue.js';
import { createStopSignal } from './runtime/stop-signal.js';
import { workUntilStopped } from './runtime/work-loop.js';
import { createJobThread } from './runtime/worker-pool.js';
import { readWorkerSettings, type WorkerSettings } from './runtime/worker-settings.js';

/** A stop that takes longer than this is cut short, ms: whoever stops us waits five seconds. */
const longestStopMs = 4500;

const log = pino({ name: 'worker' });
const stop = createStopSignal();

function settingsOrExit(): WorkerSettings {
  try {
    return readWorkerSettings(process.env);
  } catch (error) {
    // Only sentences about the environment are thrown there.
    process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
    process.exit(2);
  }
}

const settings = settingsOrExit();
const pool = createPool({
  uri: settings.databaseUrl,
  charset: 'utf8mb4',
  connectionLimit: settings.threads + 1,
  connectTimeout: 5000,
});
// A connection that dies while idle is replaced by the pool; without a listener it would end the process.
pool.on('connection', (connection) => connection.on('error', () => {}));

for (const signal of ['SIGTERM', 'SIGINT'] as const)
  process.on(signal, () => {
    if (stop.requested()) return;
    log.info({ signal }, 'stopping');
    stop.request();
    setTimeout(() => process.exit(0), longestStopMs).unref();
  });

log.info({ threads: settings.threads, processId: process.pid }, 'worker ready');
const queue = createJobQueue({ pool });
await Promise.all(
  Array.from({ length: settings.threads }, () =>
    workUntilStopped({ queue, thread: createJobThread(settings.storageFolder), stop, log }),
  ),
);
await pool.end().catch(() => {
  // Already away: there is nothing left to close.
});
log.info('worker stopped');
process.exit(0);
