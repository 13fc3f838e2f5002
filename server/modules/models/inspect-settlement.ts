import { firstScale } from '../../../shared/api/model-scale.js';
import { inspectOutput } from '../../../shared/jobs/model-inspect.js';
import { type Settlement, UnusableResult } from '../jobs/job-settler.js';
import type { WorkshopsRepository } from '../workshops/workshops.repository.js';
import type { ModelsRepository } from './models.repository.js';

interface Repositories {
  models: ModelsRepository;
  workshops: WorkshopsRepository;
}

/**
 * Stores what an inspection found with its revision, in the place of an earlier inspection, whose files
 * go. A unit that nobody chose is worked out. A job that failed or was cancelled leaves what was there,
 * and so does one that another has overtaken.
 */
export const settleInspection: Settlement<Repositories> = async (job, repos) => {
  const revision = await repos.models.lockRevision(job.subjectId);
  if (!revision) return 'orphaned';
  if (revision.jobId !== job.id) return 'stored';
  if (job.state !== 'done') {
    if (revision.hasReport) await repos.models.dropChoices(revision.id);
    return 'stored';
  }
  const parsed = inspectOutput.safeParse(job.output);
  if (!parsed.success) throw new UnusableResult('inspection', { cause: parsed.error });
  const { report, files, viewTriangles } = parsed.data;
  const first = firstScale(
    report.size,
    report.fileUnit,
    await repos.workshops.usualUnit(revision.workshopId),
  );
  // A revision that took its scale over keeps it, unless its file knows better.
  const isSettled =
    revision.scaleConfirmed || (revision.scaleReason !== '' && report.fileUnit === null);
  await repos.models.storeInspection(revision.id, {
    report,
    solidKey: files.solid,
    viewKey: files.view,
    thumbnailKey: files.thumbnail,
    proxyKey: files.proxy,
    choices: report.choices,
    viewTriangles,
    ...(isSettled ? {} : { scale: first.scale, scaleReason: first.reason }),
  });
  const { solidKey, viewKey, thumbnailKey, proxyKey } = revision;
  const kept = new Set(Object.values(files));
  const former = [solidKey, viewKey, thumbnailKey, proxyKey];
  return { replaced: former.filter((key) => key !== null && !kept.has(key)) as string[] };
};
