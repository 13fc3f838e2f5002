import { drizzle } from 'drizzle-orm/mysql2';
import { migrate } from 'drizzle-orm/mysql2/migrator';
import type { RowDataPacket } from 'mysql2/promise';
import { holdingLock } from './named-lock.js';

/**
 * Brings a database to the newest schema. Several servers may start at once: one migrates, the
 * others wait and then find nothing to do.
 * @throws Error when the lock cannot be had or a migration fails
 */
export function migrateDatabase(url: string, migrationsFolder: string): Promise<void> {
  return holdingLock(url, 'migrate', async (connection) => {
    const [charset] = await connection.query<RowDataPacket[]>(
      'SELECT @@character_set_database AS name',
    );
    // A database made with an old default could not hold names such as “Bed ⌀ 300”.
    if (charset[0]?.['name'] !== 'utf8mb4')
      await connection.query('ALTER DATABASE CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci');
    await migrate(drizzle(connection), { migrationsFolder });
  });
}
