import { ApiError } from '../../platform/http/api-error.js';

export const createPlanNotFound = () =>
  new ApiError(404, 'plan.notFound', 'There is no such plan in this workshop.');

export const createOfferNotFound = () =>
  new ApiError(404, 'plan.offerNotFound', 'That plan has no such offer.');

export const createOfferOutdated = () =>
  new ApiError(
    409,
    'plan.offerOutdated',
    'The model has another revision or another scale than when these plans were found. Make a new plan.',
  );

export const createProofFailed = () =>
  new ApiError(
    409,
    'plan.proofFailed',
    'A check of this plan failed. Say that you want its files all the same before you download them.',
  );

export const createPlanNotReady = () =>
  new ApiError(409, 'plan.notReady', 'The plan has no result yet.');
