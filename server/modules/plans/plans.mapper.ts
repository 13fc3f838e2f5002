import type { PlanResponse, PlanSummary } from '../../../shared/api/plans.contract.js';
import type { PlanOutput } from '../../../shared/jobs/plan-make.js';
import { toJobResponse } from '../jobs/jobs.mapper.js';
import type { PlanView } from './plans.service.js';

export function toPlanSummary(view: PlanView): PlanSummary {
  const { plan, job } = view;
  return {
    id: plan.id,
    modelId: plan.modelId,
    modelName: view.modelName,
    revisionNumber: view.revisionNumber,
    number: plan.number,
    seed: plan.seed,
    envelope: plan.envelope,
    createdAt: plan.createdAt.toISOString(),
    createdBy: view.createdByName,
    job: toJobResponse(job),
    pieceCount: plan.pieceCount,
    allPassed: plan.allPassed,
  };
}

export function toPlanResponse(
  view: PlanView & { plan: { result: PlanOutput | null } },
): PlanResponse {
  const { result } = view.plan;
  if (!result) return { ...toPlanSummary(view), result: null };
  const { files: _files, ...shown } = result;
  const archiveBytes = view.plan.archiveBytes ?? 0;
  return {
    ...toPlanSummary(view),
    result: { ...shown, archiveBytes },
  };
}
