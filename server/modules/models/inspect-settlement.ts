import { guessUnit } from '../../../shared/api/model-scale.js';
import { inspectOutput } from '../../../shared/jobs/model-inspect.js';
import { type Settlement, UnusableResult } from '../jobs/job-settler.js';
import type { ModelsRepository } from './models.repository.js';

/** Stores what an inspection found with its revision; a unit that nobody chose yet is guessed. */
export const settleInspection: Settlement<{ models: ModelsRepository }> = async (job, repos) => {
  const revision = await repos.models.lockRevision(job.subjectId);
  if (!revision) return 'orphaned';
  if (job.state !== 'done') return 'stored';
  const parsed = inspectOutput.safeParse(job.output);
  if (!parsed.success) throw new UnusableResult('inspection', { cause: parsed.error });
  const { report, files, viewTriangles } = parsed.data;
  const guess = guessUnit(report.size);
  await repos.models.storeInspection(revision.id, {
    report,
    solidKey: files.solid,
    viewKey: files.view,
    thumbnailKey: files.thumbnail,
    viewTriangles,
    ...(revision.scaleConfirmed ? {} : { scale: guess.scale, scaleReason: guess.reason }),
  });
  return 'stored';
};
