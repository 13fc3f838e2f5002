import type { PlanResponse, PlanSummary } from '../../../shared/api/plans.contract.js';
import { planOutput, type PlanOutput } from '../../../shared/jobs/plan-make.js';
import { usualWishes } from '../../../shared/jobs/plan-wishes.js';
import { toJobResponse } from '../jobs/jobs.mapper.js';
import type { PlanView } from './plans.service.js';

const shownOf = planOutput.omit({ files: true });

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
    otherEnvelopes: plan.otherEnvelopes ?? [],
    wishes: plan.wishes ?? usualWishes,
    fromPlan: plan.fromPlan,
    createdAt: plan.createdAt.toISOString(),
    createdBy: view.createdByName,
    job: toJobResponse(job),
    pieceCount: plan.pieceCount,
    allPassed: plan.allPassed,
    release: plan.release,
    objectives: plan.objectives,
  };
}

export function toPlanResponse(
  view: PlanView & { plan: { result: PlanOutput | null } },
): PlanResponse {
  const { result } = view.plan;
  if (!result) return { ...toPlanSummary(view), result: null };
  const archiveBytes = view.plan.archiveBytes ?? 0;
  return {
    ...toPlanSummary(view),
    // Results stored before something was added to them get its default; keys stay here.
    result: { ...shownOf.parse(result), archiveBytes },
  };
}
