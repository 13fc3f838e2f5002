import type { JobName } from '../../shared/jobs/job-map.js';
import type { JobHandler } from '../runtime/job-handler.js';
import { inspectModel } from './inspect.job.js';
import { makePlan } from './plan.job.js';

/** Who does which job: a missing or a double handler does not compile. */
export const jobHandlers = {
  'model.inspect': inspectModel,
  'plan.make': makePlan,
} satisfies { [N in JobName]: JobHandler<N> };
