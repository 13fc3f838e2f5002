import { mkdir, mkdtemp, readdir, rm, utimes, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { openDiskStorage } from './disk-storage.js';

let folder: string;
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'sw-storage-'));
});
afterEach(() => rm(folder, { recursive: true, force: true }));

async function leave(path: string, ageMs: number): Promise<void> {
  await mkdir(join(folder, path, '..'), { recursive: true });
  await writeFile(join(folder, path), 'left over');
  const then = new Date(Date.now() - ageMs);
  await utimes(join(folder, path), then, then);
}

const hour = 60 * 60 * 1000;

describe('opening the storage', () => {
  it('clears what was left half written or half received long ago, and nothing else', async () => {
    await leave('workshops/w/models/m/r/solid.mesh.1f.part', 2 * hour);
    await leave('workshops/w/models/m/r/view.glb.2f.part', hour / 2);
    await leave('workshops/w/models/m/r/solid.mesh', 90 * hour);
    await leave('incoming/old.upload', 25 * hour);
    await leave('incoming/new.upload', hour);
    await openDiskStorage(folder);
    expect(await readdir(join(folder, 'workshops/w/models/m/r'))).toEqual([
      'solid.mesh',
      'view.glb.2f.part',
    ]);
    expect(await readdir(join(folder, 'incoming'))).toEqual(['new.upload']);
  });
});
