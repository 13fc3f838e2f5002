import { jobSchemas } from '../../../shared/jobs/job-map.js';
import { planOutput } from '../../../shared/jobs/plan-make.js';
import { isStorageKey } from '../../platform/storage/storage-keys.js';
import { type Settlement, UnusableResult } from '../jobs/job-settler.js';
import type { PlansRepository } from './plans.repository.js';

/** Stores a made plan with its row. A failed or cancelled job leaves the row without a result. */
export const settlePlan: Settlement<{ plans: PlansRepository }> = async (job, repos) => {
  const plan = await repos.plans.lock(job.subjectId);
  if (!plan) return 'orphaned';
  if (job.state !== 'done') return 'stored';
  const parsed = planOutput.safeParse(job.output);
  if (!parsed.success) throw new UnusableResult('plan', { cause: parsed.error });
  const result = parsed.data;
  const { outputPrefix } = jobSchemas['plan.make'].input.parse(job.input);
  const keys = [result.files.view, ...result.files.archive.map((file) => file.key)];
  // A plan hands out its own files only, whatever a worker says.
  if (!keys.every((key) => isStorageKey(key) && key.startsWith(`${outputPrefix}/`)))
    throw new UnusableResult('plan with files outside its folder');
  await repos.plans.storeResult(plan.id, {
    result,
    pieceCount: result.pieces.length,
    objectives: result.objectives,
    allPassed: result.proof.every((row) => row.passed),
    archiveBytes: result.files.archive.reduce((sum, file) => sum + file.bytes, 0),
  });
  return 'stored';
};
