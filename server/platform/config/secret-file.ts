import { randomBytes } from 'node:crypto';
import { mkdir, readFile, writeFile } from 'node:fs/promises';
import { dirname } from 'node:path';

const BYTES = 48;

/**
 * The secret that signs sessions: made once, readable by the owner alone. Deleting the file signs
 * everyone out.
 * @throws Error when the file holds something too short to be a secret
 */
export async function readOrMakeSecret(file: string): Promise<string> {
  await mkdir(dirname(file), { recursive: true });
  try {
    await writeFile(file, randomBytes(BYTES).toString('base64url'), { flag: 'wx', mode: 0o600 });
  } catch (error) {
    // EEXIST: made at an earlier start.
    if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
  }
  const secret = (await readFile(file, 'utf8')).trim();
  if (secret.length < 32)
    throw new Error(`${file} is too short to be a secret. Delete it; a new one is made.`);
  return secret;
}
