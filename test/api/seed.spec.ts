import { readdir } from 'node:fs/promises';
import type { RowDataPacket } from 'mysql2/promise';
import { describe, expect, inject, it } from 'vitest';
import { envelopeListResponse } from '../../shared/api/envelopes.contract.js';
import { modelListResponse } from '../../shared/api/models.contract.js';
import { demoAccounts } from '../../server/seed/demo-accounts.js';
import { seedDemo } from '../../server/seed/seed-demo.js';
import { holdingLock } from '../../server/platform/db/named-lock.js';
import { createId } from '../../server/platform/ids/create-id.js';
import { ApiClient } from './support/api-client.js';
import { startTestProduct, type TestProduct } from './support/test-product.js';

async function emptyProduct(): Promise<TestProduct> {
  const product = await startTestProduct(inject('mariadbUrl'));
  await product.database.pool.query('DELETE FROM workshops');
  await product.database.pool.query('DELETE FROM users');
  return product;
}
const seed = ({ product, storage, clock, database }: TestProduct) =>
  holdingLock(database.url, 'seed', () =>
    seedDemo({ transact: product.transact, storage, clock: () => clock.now, createId }),
  );

describe('the demo workshop', () => {
  it('has an account a role, envelopes, and models that wait for their inspection', async () => {
    const product = await emptyProduct();
    expect(await seed(product)).toBe(true);
    expect(await seed(product)).toBe(false);
    for (const { email, password, role } of demoAccounts) {
      expect(email).toMatch(/\.example$/);
      const client = new ApiClient(product.app);
      const session = await client.signIn(email, password);
      expect(session.body).toMatchObject({
        role,
        user: { isDemo: true },
        workshop: { isDemo: true },
      });
      const { models } = modelListResponse.parse((await client.get('/api/models')).body);
      expect(models).toHaveLength(4);
      for (const { revision } of models) {
        expect(revision.job).toMatchObject({ kind: 'model.inspect', state: 'queued' });
        expect(revision.fileBytes).toBeGreaterThan(100_000);
      }
      const { envelopes } = envelopeListResponse.parse((await client.get('/api/envelopes')).body);
      expect(envelopes.map(({ name }) => name)).toContain('Medium bed 220 × 220 × 250');
      expect(envelopes.some(({ shape }) => shape === 'round')).toBe(true);
    }
    const [revisions] = await product.database.pool.query<RowDataPacket[]>(
      'SELECT source_key, file_bytes FROM revisions',
    );
    for (const row of revisions)
      expect(await product.storage.sizeOf(row['source_key'] as string)).toBe(row['file_bytes']);
    expect(await readdir(product.storage.incomingFolder)).toEqual([]);
    await product.stop();
  });

  it('is made once when two servers find an empty database at the same time', async () => {
    const product = await emptyProduct();
    const made = await Promise.all([seed(product), seed(product)]);
    expect(made.sort()).toEqual([false, true]);
    const [counts] = await product.database.pool.query<RowDataPacket[]>(
      'SELECT COUNT(*) AS models, COUNT(DISTINCT workshop_id) AS workshops FROM models',
    );
    expect(counts).toEqual([{ models: 4, workshops: 1 }]);
    const folders = await readdir(product.storage.pathOf('workshops'));
    expect(folders).toHaveLength(1);
    await product.stop();
  });

  it('leaves a database with a workshop alone', async () => {
    const product = await startTestProduct(inject('mariadbUrl'));
    expect(await seed(product)).toBe(false);
    await product.stop();
  });

  it('is made whole or not at all', async () => {
    const product = await emptyProduct();
    await product.database.pool.query('RENAME TABLE jobs TO elsewhere');
    await expect(seed(product)).rejects.toThrow();
    const [users] = await product.database.pool.query('SELECT id FROM users');
    expect(users).toEqual([]);
    expect(await readdir(product.storage.pathOf('workshops'))).toEqual([]);
    expect(await readdir(product.storage.incomingFolder)).toEqual([]);
    await product.stop();
  });
});
