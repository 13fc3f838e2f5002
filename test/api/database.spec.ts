import { inject, describe, expect, it } from 'vitest';
import { fileURLToPath } from 'node:url';
import type { RowDataPacket } from 'mysql2/promise';
import { migrateDatabase } from '../../server/platform/db/migrate.js';
import { createTestDatabase } from '../support/mariadb.js';

const migrationsFolder = fileURLToPath(new URL('../../migrations', import.meta.url));

describe('the database', () => {
  it('migrates once when several servers start at the same time', async () => {
    const database = await createTestDatabase(inject('mariadbUrl'));
    await database.pool.query('DROP TABLE jobs');
    await database.pool.query('DROP TABLE memberships, refresh_tokens, sessions, plans, revisions');
    await database.pool.query('DROP TABLE models, envelopes, users, workshops');
    await database.pool.query('DROP TABLE __drizzle_migrations');
    await Promise.all([1, 2, 3].map(() => migrateDatabase(database.url, migrationsFolder)));
    const [tables] = await database.pool.query<RowDataPacket[]>('SHOW TABLES');
    expect(tables.length).toBe(11);
    await database.drop();
  });

  it('works in UTC and gives JSON back as values, not as text', async () => {
    const database = await createTestDatabase(inject('mariadbUrl'));
    const [zone] = await database.pool.query<RowDataPacket[]>('SELECT @@session.time_zone AS zone');
    expect(zone[0]?.['zone']).toBe('+00:00');
    await database.pool.query(
      `INSERT INTO jobs (id, workshop_id, kind, subject_id, input, state)
       VALUES (REPEAT('a', 20), REPEAT('b', 20), 'model.inspect', REPEAT('c', 20), '{"sourceKey":"x"}', 'queued')`,
    );
    const [jobs] = await database.pool.query<RowDataPacket[]>('SELECT input FROM jobs');
    expect(jobs[0]?.['input']).toEqual({ sourceKey: 'x' });
    await database.drop();
  });
});
