import type { ErrorCode } from '../../../shared/api/error-codes.js';

export interface ErrorDetail {
  readonly path: string;
  readonly message: string;
}

/** A refusal as a value: it leaves the server through the one error middleware. */
export class ApiError extends Error {
  readonly status: number;
  readonly code: ErrorCode;
  readonly details: readonly ErrorDetail[] | undefined;

  constructor(
    status: number,
    code: ErrorCode,
    message: string,
    options: { details?: readonly ErrorDetail[]; cause?: unknown } = {},
  ) {
    super(message, { cause: options.cause });
    this.name = 'ApiError';
    this.status = status;
    this.code = code;
    this.details = options.details;
  }
}

export const createRequestInvalid = (message: string, details?: readonly ErrorDetail[]) =>
  new ApiError(400, 'request.invalid', message, details ? { details } : {});

export const createWrongContentType = (message: string) =>
  new ApiError(415, 'request.invalid', message);

export const createTooLarge = (message: string) => new ApiError(413, 'request.tooLarge', message);

export const createTooManyRequests = (message: string) =>
  new ApiError(429, 'request.tooMany', message);

export const createNothingHere = () =>
  new ApiError(404, 'request.notFound', 'There is nothing at this address.');

export const createForgedRequest = () =>
  new ApiError(
    403,
    'request.forged',
    'The request did not come from our own page. Reload the page and try again.',
  );

export const createSessionRequired = () => new ApiError(401, 'session.required', 'Please sign in.');

export const createForbidden = (message: string) => new ApiError(403, 'session.forbidden', message);
