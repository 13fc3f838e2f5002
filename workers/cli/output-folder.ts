import { randomUUID } from 'node:crypto';
import {
  mkdir,
  mkdtemp,
  readdir,
  readFile,
  rename,
  rm,
  rmdir,
  stat,
  writeFile,
} from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { dirname, join, resolve } from 'node:path';
import { type PieceFiles } from '../building/make-pieces.js';
import { MANIFEST_KIND } from '../export/manifest.js';
import { UsageError } from './usage-error.js';

/** A folder that receives a result whole or not at all. */
export interface PieceFolder {
  readonly files: PieceFiles;
  /** Makes what was written visible as the result. */
  readonly keep: () => Promise<void>;
  /** Leaves no trace of what was written and not kept. Safe to call after `keep`. */
  readonly discard: () => Promise<void>;
}

/** What a result consists of; the manifest last, because its presence says the result is whole. */
const RESULT = ['pieces', 'pins', 'lips', 'cut-list.csv', 'manifest.json'] as const;
/** Not every plan has pins or lips. */
const OPTIONAL: readonly string[] = ['pins', 'lips'];
/** Files that each of the folders may hold. */
const FOLDERS = {
  pieces: /^P\d{2,3}\.stl$/,
  pins: /^pin-[\d.]+x[\d.]+\.stl$/,
  lips: /^lip-\d+\.stl$/,
};
const STAGING_PREFIX = '.seamwright-';

/** Pieces that are only proven: a temporary folder that goes away. */
export async function openTemporaryFolder(): Promise<PieceFolder> {
  const root = await mkdtemp(join(tmpdir(), 'seamwright-'));
  return {
    files: filesIn(root),
    keep: async () => {},
    discard: () => rm(root, { recursive: true, force: true }),
  };
}

/**
 * Whether a folder may receive a result: it does not exist, is empty, or holds nothing but an earlier
 * result of ours. Throws a UsageError with a sentence (without its end) otherwise. Changes nothing.
 */
export async function checkOutputFolder(folder: string): Promise<void> {
  const found = await stat(folder)
    .catch(absent)
    .catch((error: NodeJS.ErrnoException) => {
      const why = error.code === 'ENOTDIR' ? 'lies below a file' : `cannot be used (${error.code})`;
      throw new UsageError(`the output folder “${folder}” ${why}`);
    });
  if (!found) return;
  if (!found.isDirectory()) throw new UsageError(`the output “${folder}” is not a folder`);
  const entries = (await readdir(folder)).filter((name) => !name.startsWith(STAGING_PREFIX));
  if (entries.length === 0 || (await isEarlierResult(folder, entries))) return;
  throw new UsageError(
    `the output folder “${folder}” holds other files, and nothing of them is overwritten`,
  );
}

/** Opens a checked folder; it is made when missing. Files are staged inside it until `keep`. */
export async function openOutputFolder(folder: string): Promise<PieceFolder> {
  await checkOutputFolder(folder);
  const firstMade = await makeFolder(resolve(folder));
  // A run that was killed may have left its staging behind.
  for (const name of await readdir(folder))
    if (name.startsWith(STAGING_PREFIX)) await rm(join(folder, name), { recursive: true });
  const staging = join(folder, STAGING_PREFIX + randomUUID());
  const fresh = join(staging, 'new');
  const old = join(staging, 'old');
  let isKept = false;
  return {
    files: filesIn(fresh),
    keep: async () => {
      await mkdir(old, { recursive: true });
      await exchange(folder, fresh, old);
      isKept = true;
    },
    discard: async () => {
      await rm(staging, { recursive: true, force: true });
      if (!isKept && firstMade !== undefined) await removeEmpty(folder, firstMade);
    },
  };
}

/**
 * Makes a folder and what is missing above it; the outermost that was made, or undefined. Node's own
 * recursive mkdir never ends where a parent exists but takes no entries (/proc).
 */
async function makeFolder(folder: string): Promise<string | undefined> {
  try {
    await mkdir(folder);
    return folder;
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    if (code === 'EEXIST') return undefined;
    if (code !== 'ENOENT' || (await stat(dirname(folder)).catch(absent))) throw error;
    const outermost = await makeFolder(dirname(folder));
    await mkdir(folder);
    return outermost;
  }
}

/** Removes the folders we made, from the inner to the outer, as far as nobody else uses them. */
async function removeEmpty(inner: string, outer: string): Promise<void> {
  for (let folder = resolve(inner); ; folder = dirname(folder)) {
    try {
      await rmdir(folder);
    } catch {
      // Not empty: somebody put something in while we worked.
      return;
    }
    if (folder === resolve(outer)) return;
  }
}

/** Moves the old result away and the new one in; on failure puts the old one back. */
async function exchange(folder: string, fresh: string, old: string): Promise<void> {
  const movedAway: string[] = [];
  const movedIn: string[] = [];
  try {
    for (const name of [...RESULT].reverse())
      if (await stat(join(folder, name)).catch(absent)) {
        await rename(join(folder, name), join(old, name));
        movedAway.push(name);
      }
    for (const name of RESULT) {
      const mayBeMissing = OPTIONAL.includes(name);
      if (mayBeMissing && !(await stat(join(fresh, name)).catch(absent))) continue;
      await rename(join(fresh, name), join(folder, name));
      movedIn.push(name);
    }
  } catch (error) {
    // A full or vanished disk: the folder must hold the old result or the new one, no mixture.
    for (const name of movedIn) await rename(join(folder, name), join(fresh, name));
    for (const name of movedAway) await rename(join(old, name), join(folder, name));
    throw error;
  }
}

async function isEarlierResult(folder: string, entries: readonly string[]): Promise<boolean> {
  if (!entries.every((name) => (RESULT as readonly string[]).includes(name))) return false;
  if (!entries.includes('manifest.json')) return false;
  for (const [name, isOurs] of Object.entries(FOLDERS)) {
    if (!entries.includes(name)) continue;
    const files = await readdir(join(folder, name)).catch(() => ['?']);
    if (!files.every((file) => isOurs.test(file))) return false;
  }
  try {
    const manifest: unknown = JSON.parse(await readFile(join(folder, 'manifest.json'), 'utf8'));
    return (manifest as { kind?: unknown } | null)?.kind === MANIFEST_KIND;
  } catch {
    // Not readable or not JSON: somebody else's file.
    return false;
  }
}

function filesIn(root: string): PieceFiles {
  return {
    write: async (name, bytes) => {
      const path = join(root, name);
      await mkdir(dirname(path), { recursive: true });
      await writeFile(path, bytes);
    },
    read: (name) => readFile(join(root, name)),
  };
}

function absent(error: NodeJS.ErrnoException): undefined {
  if (error.code === 'ENOENT') return undefined;
  throw error;
}
