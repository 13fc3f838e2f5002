import { ApiError, createWrongContentType } from '../../platform/http/api-error.js';

export const createModelNotFound = () =>
  new ApiError(404, 'model.notFound', 'There is no such model in this workshop.');

export const createNoPictureYet = () =>
  new ApiError(404, 'model.notFound', 'The model has no picture yet.');

export const createModelNotReady = () =>
  new ApiError(409, 'model.notReady', 'The model has not been inspected yet.');

export const createModelNotPlannable = (reason: string) =>
  new ApiError(409, 'model.notPlannable', reason);

export const createModelInUse = (planCount: number) =>
  new ApiError(
    409,
    'model.inUse',
    planCount === 1
      ? 'The model has a plan. Delete the plan first.'
      : `The model has ${planCount} plans. Delete them first.`,
  );

export const createRevisionInUse = (planCount: number) =>
  new ApiError(
    409,
    'model.inUse',
    `This revision has ${planCount === 1 ? 'a plan' : `${planCount} plans`}. Upload the file as a new revision to mend it in another way.`,
  );

export const createNothingToAccept = () =>
  new ApiError(
    409,
    'model.notPlannable',
    'There is nothing to accept: the model is in order, or something else has to be decided first.',
  );

export const createNotAModel = (reason: string) => createWrongContentType(reason);
