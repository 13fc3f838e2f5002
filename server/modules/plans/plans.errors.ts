import { ApiError } from '../../platform/http/api-error.js';

export const createPlanNotFound = () =>
  new ApiError(404, 'plan.notFound', 'There is no such plan in this workshop.');

export const createPlanNotReady = () =>
  new ApiError(409, 'plan.notReady', 'The plan has no result yet.');
