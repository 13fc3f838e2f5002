import { mkdir, readdir, rename, rm, stat } from 'node:fs/promises';
import { dirname, join, resolve, sep } from 'node:path';
import { isStorageKey } from './storage-keys.js';

/** Files of the product on the local disk, by key. Workers use the same folder. */
export interface FileStorage {
  /** The folder itself. */
  readonly folder: string;
  /** Where uploads are received; on the same disk, so taking one in is a rename. */
  readonly incomingFolder: string;
  /** Where a key lives. Throws on a text that is no key. */
  readonly pathOf: (key: string) => string;
  /** Moves a received file to its key. */
  readonly takeIn: (path: string, key: string) => Promise<void>;
  /** Size in bytes, or null when there is no such file. */
  readonly sizeOf: (key: string) => Promise<number | null>;
  /** Removes a file or folder with all in it; nothing happens when it is not there. */
  readonly remove: (key: string) => Promise<void>;
}

/** Opens the storage and clears what killed servers and workers left half received or half written. */
export async function openDiskStorage(folder: string): Promise<FileStorage> {
  const root = resolve(folder);
  const incomingFolder = join(root, 'incoming');
  await mkdir(incomingFolder, { recursive: true });
  await clearLeftOvers(incomingFolder);
  await clearUnfinished(root);

  function pathOf(key: string): string {
    if (!isStorageKey(key)) throw new Error(`Not a storage key: ${key.slice(0, 80)}`);
    return root + sep + key.replaceAll('/', sep);
  }

  return {
    folder: root,
    incomingFolder,
    pathOf,
    async takeIn(path, key) {
      const target = pathOf(key);
      await mkdir(dirname(target), { recursive: true });
      await rename(path, target);
    },
    async sizeOf(key) {
      try {
        return (await stat(pathOf(key))).size;
      } catch (error) {
        if ((error as NodeJS.ErrnoException).code === 'ENOENT') return null;
        throw error;
      }
    },
    remove: (key) => rm(pathOf(key), { recursive: true, force: true }),
  };
}

/** Old enough that no server that still runs can be receiving it. */
const ABANDONED_AFTER_MS = 24 * 60 * 60 * 1000;

async function clearLeftOvers(folder: string): Promise<void> {
  for (const name of await readdir(folder)) {
    const path = join(folder, name);
    const { mtimeMs } = await stat(path);
    if (Date.now() - mtimeMs > ABANDONED_AFTER_MS) await rm(path, { recursive: true, force: true });
  }
}

/** Workers write a file under a name that ends like this until it is whole. */
const UNFINISHED = '.part';
/** The largest file is written in minutes. */
const UNFINISHED_AFTER_MS = 60 * 60 * 1000;

async function clearUnfinished(root: string): Promise<void> {
  for (const entry of await readdir(root, { recursive: true, withFileTypes: true })) {
    if (!entry.isFile() || !entry.name.endsWith(UNFINISHED)) continue;
    const path = join(entry.parentPath, entry.name);
    const { mtimeMs } = await stat(path);
    if (Date.now() - mtimeMs > UNFINISHED_AFTER_MS) await rm(path, { force: true });
  }
}
