import { mkdtemp, readdir, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { createDiskStorage } from './storage.js';

const folder = await mkdtemp(join(tmpdir(), 'storage-'));
afterAll(() => rm(folder, { recursive: true }));
const storage = createDiskStorage(folder);

describe('stored files', () => {
  it('are written whole, read back, and replaced without leaving anything beside them', async () => {
    await storage.write('a/b/c.txt', Uint8Array.of(1, 2, 3));
    await storage.write('a/b/c.txt', Uint8Array.of(4));
    expect([...(await storage.read('a/b/c.txt'))]).toEqual([4]);
    expect(await readdir(join(folder, 'a/b'))).toEqual(['c.txt']);
  });

  it('leave nothing behind when a write fails', async () => {
    await storage.write('taken', Uint8Array.of(1));
    await expect(storage.write('taken/below', Uint8Array.of(1))).rejects.toThrow();
    await storage.write('folder/file', Uint8Array.of(1));
    await expect(storage.write('folder', Uint8Array.of(1))).rejects.toThrow();
    expect((await readdir(folder)).filter((name) => name.endsWith('.part'))).toEqual([]);
  });

  it('have plain relative keys: nothing climbs out', () => {
    const bad = [
      '',
      '/',
      '/etc/passwd',
      '../a',
      'a/../b',
      'a//b',
      'a/',
      '.',
      'a/.',
      '.hidden',
      'a\\b',
      'a\0',
      'é',
      'a b',
      'x'.repeat(501),
    ];
    for (const key of bad) expect(() => storage.pathOf(key)).toThrow(/Not a storage key/);
    expect(storage.pathOf('models/a1/rev-2.v3/file_4.stl')).toBe(
      join(folder, 'models/a1/rev-2.v3/file_4.stl'),
    );
  });
});
