import { ApiError } from '../../platform/http/api-error.js';

export const createJobNotFound = () =>
  new ApiError(404, 'job.notFound', 'There is no such job in this workshop.');
