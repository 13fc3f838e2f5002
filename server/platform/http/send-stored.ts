import type { Response } from 'express';
import type { FileStorage } from '../storage/disk-storage.js';
import { isStorageKey } from '../storage/storage-keys.js';

/**
 * Streams a stored file with ranges and an ETag. The browser keeps it but asks each time, so that
 * signing out counts at once.
 */
export function sendStored(
  res: Response,
  storage: FileStorage,
  file: { key: string; type: string },
): Promise<void> {
  if (!isStorageKey(file.key)) throw new Error('Not a storage key');
  return new Promise((resolve, reject) => {
    const headers = { 'Content-Type': file.type, 'Cache-Control': 'private, no-cache' };
    res.sendFile(file.key, { root: storage.folder, headers }, (error: Error | undefined) => {
      // The person went away: nobody is left to answer.
      const isGone = error && ['ECONNABORTED', 'EPIPE', 'ECONNRESET'].includes(codeOf(error));
      if (error && !isGone) reject(error);
      else resolve();
    });
  });
}

function codeOf(error: Error): string {
  return (error as NodeJS.ErrnoException).code ?? '';
}
