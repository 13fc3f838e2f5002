import type { Response } from 'express';
import { ZipArchive } from 'archiver';
import type { PlanOutput } from '../../../shared/jobs/plan-make.js';
import type { FileStorage } from '../../platform/storage/disk-storage.js';
import { attachmentHeader } from './attachment-name.js';

/** STL halves even at the lightest level; a higher one costs time and gains little. */
const LEVEL = 1;

/**
 * Streams a plan's files as one ZIP, never whole in memory. When the person breaks it off the
 * reading stops.
 * @param madeAt the time stamp of every entry: two downloads give the same bytes
 * @throws Error before the first byte when a file is missing
 */
export async function streamPlanArchive({
  res,
  storage,
  files,
  fileName,
  madeAt,
}: {
  res: Response;
  storage: FileStorage;
  files: PlanOutput['files']['archive'];
  fileName: string;
  madeAt: Date;
}): Promise<void> {
  for (const file of files)
    if ((await storage.sizeOf(file.key)) !== file.bytes)
      throw new Error(`${file.key} is missing or was changed`);

  // One file at a time: looked up side by side, entries come in the order the disk answers in.
  const archive = new ZipArchive({ zlib: { level: LEVEL }, statConcurrency: 1 });
  res.setHeader('Content-Type', 'application/zip');
  res.setHeader('Content-Disposition', attachmentHeader(fileName));
  res.setHeader('Cache-Control', 'private, no-store');
  const finished = new Promise<void>((resolve, reject) => {
    res.once('close', () => {
      if (!res.writableFinished) archive.abort();
      resolve();
    });
    archive.once('error', reject);
    archive.once('warning', reject);
  });
  archive.pipe(res);
  for (const file of files)
    archive.file(storage.pathOf(file.key), { name: file.name, date: madeAt });
  // Settles when all is written or the archive was aborted; errors arrive by the event.
  archive.finalize().catch(() => undefined);
  await finished;
}
