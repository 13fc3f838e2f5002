import { readFileSync } from 'node:fs';
import { inject, describe, expect, it } from 'vitest';
import { fileURLToPath } from 'node:url';
import type { RowDataPacket } from 'mysql2/promise';
import { meshReport } from '../../shared/jobs/model-inspect.js';
import { migrateDatabase } from '../../server/platform/db/migrate.js';
import { createTestDatabase } from '../support/mariadb.js';

const migrationsFolder = fileURLToPath(new URL('../../migrations', import.meta.url));

describe('the database', () => {
  it('migrates once when several servers start at the same time', async () => {
    const database = await createTestDatabase(inject('mariadbUrl'));
    await database.pool.query('DROP TABLE jobs');
    await database.pool.query('DROP TABLE memberships, refresh_tokens, sessions, plans, revisions');
    await database.pool.query('DROP TABLE models, envelopes, materials, users, workshops');
    await database.pool.query('DROP TABLE __drizzle_migrations');
    await Promise.all([1, 2, 3].map(() => migrateDatabase(database.url, migrationsFolder)));
    const [tables] = await database.pool.query<RowDataPacket[]>('SHOW TABLES');
    expect(tables.length).toBe(12);
    await database.drop();
  });

  it('brings reports of the first version to the present form', async () => {
    const database = await createTestDatabase(inject('mariadbUrl'));
    const id = (letter: string) => letter.repeat(20);
    const old = {
      ...{ format: 'stl-ascii', fileBytes: 684, facetsRead: 12, triangles: 12, vertices: 8 },
      ...{ degenerateDropped: 0, duplicateFacets: 0, openEdges: 0, nonManifoldEdges: 0 },
      ...{ misorientedEdges: 0, shells: 1, cavities: 0, closed: true, turnedOutward: false },
      ...{ volume: 6e7, area: 940_000.5, size: [300, 400, 500], min: [0, -1.5, 0] },
      ...{ plannable: true, refusal: null, notes: ['A note.'] },
    };
    await database.pool.query(
      'INSERT INTO users (id, email, name, password_hash, created_at) VALUES (?, ?, ?, ?, NOW())',
      [...[id('u'), 'a@example.org', 'A', 'x']],
    );
    await database.pool.query('INSERT INTO workshops (id, name, created_at) VALUES (?, ?, NOW())', [
      id('w'),
      'W',
    ]);
    await database.pool.query(
      'INSERT INTO models (id, workshop_id, name, created_at, created_by) VALUES (?, ?, ?, NOW(), ?)',
      [id('m'), id('w'), 'M', id('u')],
    );
    await database.pool.query(
      `INSERT INTO revisions (id, model_id, number, file_name, file_bytes, source_key, report,
         view_triangles, scale, job_id, created_at) VALUES (?, ?, 1, 'a.stl', 684, 'k', ?, 12, '{}', ?, NOW())`,
      [id('r'), id('m'), JSON.stringify(old), id('j')],
    );
    const file = new URL('../../migrations/0002_reports_of_before.sql', import.meta.url);
    const sql = readFileSync(file, 'utf8').replace(/^--.*$/gm, '');
    await database.pool.query(sql);
    await database.pool.query(sql);
    const [rows] = await database.pool.query<RowDataPacket[]>('SELECT report FROM revisions');
    const report = meshReport.parse(rows[0]!['report']);
    expect(report).toMatchObject(old);
    expect(report.asRead).toMatchObject({ triangles: 12, closed: true, min: [0, -1.5, 0] });
    expect(report.proxy).toEqual({ triangles: 12, deviation: null });
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
