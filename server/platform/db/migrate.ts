import { drizzle } from 'drizzle-orm/mysql2';
import { migrate } from 'drizzle-orm/mysql2/migrator';
import { createConnection, type RowDataPacket } from 'mysql2/promise';

const LOCK_WAIT_S = 60;

/**
 * Brings a database to the newest schema. Several servers may start at once: one migrates, the
 * others wait for its lock and then find nothing to do.
 * @throws Error when the lock cannot be had or a migration fails
 */
export async function migrateDatabase(url: string, migrationsFolder: string): Promise<void> {
  const connection = await createConnection({ uri: url, timezone: 'Z', charset: 'utf8mb4' });
  try {
    const [locked] = await connection.query<RowDataPacket[]>(
      "SELECT GET_LOCK(CONCAT('migrate:', DATABASE()), ?) AS got",
      [LOCK_WAIT_S],
    );
    if (locked[0]?.['got'] !== 1)
      throw new Error(`Another server has been migrating the database for ${LOCK_WAIT_S} s.`);
    const [charset] = await connection.query<RowDataPacket[]>(
      'SELECT @@character_set_database AS name',
    );
    // A database made with an old default could not hold names such as “Bed ⌀ 300”.
    if (charset[0]?.['name'] !== 'utf8mb4')
      await connection.query('ALTER DATABASE CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci');
    await migrate(drizzle(connection), { migrationsFolder });
  } finally {
    // The lock ends with its connection.
    await connection.end();
  }
}
