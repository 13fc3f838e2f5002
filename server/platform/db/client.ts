import { drizzle, type MySql2Database } from 'drizzle-orm/mysql2';
import { createPool, type Pool } from 'mysql2/promise';

/** What a repository needs: the database itself or a transaction in it. */
export type Db = Pick<
  MySql2Database,
  'select' | 'selectDistinct' | 'insert' | 'update' | 'delete' | 'execute' | 'transaction'
>;

export interface DatabaseClient {
  readonly db: Db;
  readonly pool: Pool;
  readonly close: () => Promise<void>;
}

/** Opens a pool on a `mysql://` address. Every connection works in UTC, whatever the server's zone. */
export function openDatabase(url: string, { connectionLimit = 10 } = {}): DatabaseClient {
  const pool = createPool({ uri: url, connectionLimit, timezone: 'Z', charset: 'utf8mb4' });
  // Queued ahead of the borrower's first statement on the same connection.
  pool.pool.on('connection', (connection) => {
    connection.query("SET time_zone = '+00:00'");
  });
  return { db: drizzle(pool), pool, close: () => pool.end() };
}
