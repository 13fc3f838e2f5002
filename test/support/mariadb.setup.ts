import { existsSync, mkdtempSync, rmSync, statfsSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';
import { startMariadb } from '../../server/bin/mariadb.mjs';

declare module 'vitest' {
  export interface ProvidedContext {
    /** Address of the throw-away MariaDB; `createTestDatabase` makes a database in it. */
    mariadbUrl: string;
  }
}

/** A dozen small databases; less room than this is what some containers give to /dev/shm. */
const NEEDED_BYTES = 1024 * 1024 * 1024;

function fastFolder(): string {
  if (!existsSync('/dev/shm')) return tmpdir();
  const { bavail, bsize } = statfsSync('/dev/shm');
  return bavail * bsize > NEEDED_BYTES ? '/dev/shm' : tmpdir();
}

/** A MariaDB of the tests' own, in memory where the machine has room there, gone afterwards. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const folder = mkdtempSync(join(fastFolder(), 'sw-test-'));
  const mariadb = await startMariadb({
    dataDir: join(folder, 'mariadb'),
    database: 'seamwright_test',
    throwAway: true,
  });
  project.provide('mariadbUrl', mariadb.urlOf('seamwright_test'));
  return async () => {
    await mariadb.stop();
    rmSync(folder, { recursive: true, force: true, maxRetries: 20, retryDelay: 250 });
  };
}
