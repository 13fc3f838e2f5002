import { ApiError } from '../../platform/http/api-error.js';

export const createEnvelopeNotFound = () =>
  new ApiError(404, 'envelope.notFound', 'There is no such envelope in this workshop.');

export const createEnvelopeNameTaken = (name: string) =>
  new ApiError(409, 'envelope.nameTaken', `There is an envelope named “${name}” already.`, {
    details: [{ path: 'name', message: 'This name is taken' }],
  });
