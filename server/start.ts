import { type Server, createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { maxModelBytes } from '../shared/api/models.contract.js';
import { createApp } from './app.js';
import { compose } from './compose.js';
import { signInLimits } from './modules/session/sign-in-limits.js';
import type { Config } from './platform/config/config.js';
import { readOrMakeSecret } from './platform/config/secret-file.js';
import { openDatabase } from './platform/db/client.js';
import { migrateDatabase } from './platform/db/migrate.js';
import { holdingLock } from './platform/db/named-lock.js';
import { createId } from './platform/ids/create-id.js';
import type { Logger } from './platform/logging/logger.js';
import { openDiskStorage } from './platform/storage/disk-storage.js';
import { seedDemo } from './seed/seed-demo.js';

/** 512 MB over a slow line take a while; Node's own limit is five minutes. */
const LONGEST_REQUEST_MS = 60 * 60 * 1000;
const DRAIN_MS = 2_000;

/** Reports a finished step of the start with its time. */
export type ReportStep = (what: string, ms: number) => void;

export interface RunningServer {
  readonly address: string;
  /** Whether the sign-in page shows the demo accounts. */
  readonly hasDemo: boolean;
  /** Lets running requests end for two seconds, then closes everything. */
  readonly stop: () => Promise<void>;
}

/**
 * Brings the database up to date, seeds an empty one, and listens.
 * @throws Error with a sentence when the database or the port cannot be had
 */
export async function startServer(
  config: Config,
  logger: Logger,
  report: ReportStep,
): Promise<RunningServer> {
  const step = async <T>(
    what: (result: T) => string | null,
    work: () => Promise<T>,
  ): Promise<T> => {
    const started = performance.now();
    const result = await work();
    const done = what(result);
    if (done) report(done, performance.now() - started);
    return result;
  };
  const secret = await readOrMakeSecret(config.secretFile);
  const storage = await openDiskStorage(config.storageFolder);
  await step(
    () => 'Database up to date',
    () => migrateDatabase(config.databaseUrl, config.migrationsFolder),
  );
  const database = openDatabase(config.databaseUrl);
  try {
    const clock = () => new Date();
    const product = compose({
      db: database.db,
      storage,
      secret,
      logger,
      clock,
      createId,
      maxModelBytes,
      signInLimits,
    });
    if (config.seedsDemo)
      await step(
        (wasEmpty: boolean) => (wasEmpty ? 'Demo workshop made' : null),
        () =>
          holdingLock(config.databaseUrl, 'seed', () =>
            seedDemo({ transact: product.transact, storage, clock, createId }),
          ),
      );
    const app = createApp({
      routes: product.routes,
      authenticate: product.sessions.authenticate,
      secret,
      logger,
      webFolder: config.webFolder,
      proxies: config.proxies,
    });
    const server = createServer({ requestTimeout: LONGEST_REQUEST_MS }, app);
    await listen(server, config);
    product.monitor.start();
    const stop = async () => {
      await product.monitor.stop();
      await close(server);
      await database.close();
    };
    return { address: addressOf(server), hasDemo: await product.repos.workshops.hasDemo(), stop };
  } catch (error) {
    await database.close();
    throw error;
  }
}

function listen(server: Server, { port, host }: Config): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, host, resolve);
  });
}

/** Event streams never end by themselves, so what is still open after a while is cut. */
function close(server: Server): Promise<void> {
  return new Promise((resolve) => {
    const cut = setTimeout(() => server.closeAllConnections(), DRAIN_MS);
    server.close(() => {
      clearTimeout(cut);
      resolve();
    });
    server.closeIdleConnections();
  });
}

function addressOf(server: Server): string {
  const { address, port } = server.address() as AddressInfo;
  const host = ['0.0.0.0', '::'].includes(address) ? 'localhost' : address;
  return `http://${host.includes(':') ? `[${host}]` : host}:${port}`;
}
