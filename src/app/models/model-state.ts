import { type ModelResponse } from '../../../shared/api/models.contract.js';
import { isFinal } from '../../../shared/jobs/job-map.js';

/** How a model stands, as a word for tables and an icon. */
export interface ModelState {
  readonly kind: 'inspecting' | 'ready' | 'asking' | 'refused' | 'failed' | 'cancelled';
  readonly words: string;
  readonly icon: string;
}

export function modelState(model: ModelResponse): ModelState {
  const { job, report } = model.revision;
  if (!isFinal(job.state)) {
    const percent = Math.floor(job.fraction * 100);
    const words = job.state === 'queued' ? 'Waiting for inspection' : `Inspecting, ${percent} %`;
    return { kind: 'inspecting', words, icon: 'hourglass_empty' };
  }
  if (job.state === 'cancelled' && !report) {
    return { kind: 'cancelled', words: 'Inspection cancelled', icon: 'block' };
  }
  if (!report) {
    const isRefusal = job.error?.code === 'refused';
    return isRefusal
      ? { kind: 'refused', words: 'File refused', icon: 'error' }
      : { kind: 'failed', words: 'Inspection failed', icon: 'error' };
  }
  if (model.revision.isPlannable) {
    return { kind: 'ready', words: 'Ready to plan', icon: 'check_circle' };
  }
  return report.asks.length > 0
    ? { kind: 'asking', words: 'Needs a decision', icon: 'help' }
    : { kind: 'refused', words: 'Cannot be planned', icon: 'error' };
}

/** Whether the inspection is still to end. */
export function isInspecting(model: ModelResponse): boolean {
  return !isFinal(model.revision.job.state);
}
