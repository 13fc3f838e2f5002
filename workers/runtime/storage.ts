import { randomUUID } from 'node:crypto';
import { mkdir, readFile, rename, rm, writeFile } from 'node:fs/promises';
import { dirname, resolve, sep } from 'node:path';

/** Stored files by key. A key is a relative path of plain names joined by `/`. */
export interface Storage {
  /** Where a key lives on this disk. Throws on a key that is not one. */
  readonly pathOf: (key: string) => string;
  /** Whole or not at all: readers see the old bytes or the new ones. */
  readonly write: (key: string, bytes: Uint8Array) => Promise<void>;
  readonly read: (key: string) => Promise<Uint8Array>;
}

/** Letters, digits, `_`, `-` and inner dots; no empty part, no `.` or `..`, nothing absolute. */
const keyPattern =
  /^[A-Za-z0-9_-]+(?:\.[A-Za-z0-9_-]+)*(?:\/[A-Za-z0-9_-]+(?:\.[A-Za-z0-9_-]+)*)*$/;
const longestKey = 500;

/** Files under one folder of the local disk. */
export function createDiskStorage(folder: string): Storage {
  const root = resolve(folder);

  function pathOf(key: string): string {
    if (key.length > longestKey || !keyPattern.test(key))
      throw new Error(`Not a storage key: ${JSON.stringify(key.slice(0, 80))}`);
    return root + sep + key.replaceAll('/', sep);
  }

  async function write(key: string, bytes: Uint8Array): Promise<void> {
    const path = pathOf(key);
    await mkdir(dirname(path), { recursive: true });
    const unfinished = `${path}.${randomUUID()}.part`;
    try {
      await writeFile(unfinished, bytes);
      await rename(unfinished, path);
    } catch (error) {
      // A full disk or a lost folder: leave nothing behind, then say so.
      await rm(unfinished, { force: true });
      throw error;
    }
  }

  return { pathOf, write, read: (key) => readFile(pathOf(key)) };
}
