import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Express } from 'express';
import { pino } from 'pino';
import type { Role } from '../../../shared/api/roles.js';
import { createApp } from '../../../server/app.js';
import { compose, type Dependencies, type Product } from '../../../server/compose.js';
import { hashPassword } from '../../../server/modules/accounts/passwords.js';
import { createId } from '../../../server/platform/ids/create-id.js';
import {
  type FileStorage,
  openDiskStorage,
} from '../../../server/platform/storage/disk-storage.js';
import { createTestDatabase, type TestDatabase } from '../../support/mariadb.js';
import { ApiClient } from './api-client.js';

export const PASSWORD = 'correct horse';
const everyRole: readonly Role[] = ['owner', 'shopLead', 'designer', 'maker'];

/** The server on a database of its own, with two workshops and a person of every role in each. */
export interface TestProduct {
  readonly app: Express;
  readonly product: Product;
  readonly database: TestDatabase;
  readonly storage: FileStorage;
  readonly webFolder: string;
  /** The server's clock; moves only when told. */
  readonly clock: { now: Date; advance: (ms: number) => void };
  readonly workshopIds: Record<'a' | 'b', string>;
  readonly signIn: (role: Role, workshop?: 'a' | 'b') => Promise<ApiClient>;
  readonly stop: () => Promise<void>;
}

export async function startTestProduct(
  mariadbUrl: string,
  overrides: Partial<Dependencies> = {},
): Promise<TestProduct> {
  const database = await createTestDatabase(mariadbUrl);
  const folder = await mkdtemp(join(tmpdir(), 'sw-api-'));
  const storage = await openDiskStorage(join(folder, 'storage'));
  const webFolder = join(folder, 'web');
  const clock = {
    now: new Date(),
    advance: (ms: number) => {
      clock.now = new Date(clock.now.getTime() + ms);
    },
  };
  const secret = 'only for the tests, long enough to be a secret';
  const logger = pino({ level: 'silent' });
  const product = compose({
    db: database.db,
    storage,
    secret,
    logger,
    clock: () => clock.now,
    createId,
    maxModelBytes: 1024 * 1024,
    signInLimits: { windowMs: 60_000, perAccount: 1_000, perAddress: 1_000 },
    ...overrides,
  });
  const app = createApp({
    routes: product.routes,
    authenticate: product.sessions.authenticate,
    secret,
    logger,
    webFolder,
    proxies: 0,
  });
  const passwordHash = await hashPassword(PASSWORD);
  const workshopIds = { a: createId(), b: createId() };
  for (const [key, workshopId] of Object.entries(workshopIds)) {
    const createdAt = clock.now;
    await product.repos.workshops.add({ id: workshopId, name: key, isDemo: false, createdAt });
    for (const role of everyRole) {
      const userId = createId();
      const email = emailOf(role, key);
      const name = `${role} of ${key}`;
      await product.repos.accounts.add({
        id: userId,
        email,
        name,
        passwordHash,
        isDemo: false,
        createdAt,
      });
      await product.repos.workshops.addMember({ userId, workshopId, role, createdAt });
    }
  }
  return {
    app,
    product,
    database,
    storage,
    webFolder,
    clock,
    workshopIds,
    async signIn(role, workshop = 'a') {
      const client = new ApiClient(app);
      await client.signIn(emailOf(role, workshop), PASSWORD);
      return client;
    },
    async stop() {
      await product.monitor.stop();
      await database.drop();
      await rm(folder, { recursive: true, force: true });
    },
  };
}

export function emailOf(role: Role, workshop: string): string {
  return `${role.toLowerCase()}@${workshop}.example`;
}
