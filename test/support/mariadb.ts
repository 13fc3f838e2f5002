import { randomBytes } from 'node:crypto';
import { fileURLToPath } from 'node:url';
import { createConnection } from 'mysql2/promise';
import { type DatabaseClient, openDatabase } from '../../server/platform/db/client.js';
import { migrateDatabase } from '../../server/platform/db/migrate.js';

const migrationsFolder = fileURLToPath(new URL('../../migrations', import.meta.url));

export interface TestDatabase extends DatabaseClient {
  readonly url: string;
  /** Closes the pool and drops the database. */
  readonly drop: () => Promise<void>;
}

/**
 * A new, empty database with the real migrations; one a test file.
 * @param mariadbUrl `inject('mariadbUrl')` of vitest
 */
export async function createTestDatabase(mariadbUrl: string): Promise<TestDatabase> {
  const name = `seamwright_test_${randomBytes(6).toString('hex')}`;
  await runAt(mariadbUrl, `CREATE DATABASE \`${name}\``);
  const address = new URL(mariadbUrl);
  address.pathname = `/${name}`;
  const url = address.href;
  await migrateDatabase(url, migrationsFolder);
  const client = openDatabase(url);
  const drop = async () => {
    await client.close();
    await runAt(mariadbUrl, `DROP DATABASE \`${name}\``);
  };
  return { ...client, url, drop };
}

async function runAt(url: string, statement: string): Promise<void> {
  const connection = await createConnection(url);
  try {
    await connection.query(statement);
  } finally {
    await connection.end();
  }
}
