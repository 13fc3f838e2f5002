import type { ErrorRequestHandler } from 'express';
import { MulterError } from 'multer';
import type { ErrorResponse } from '../../../shared/api/error-codes.js';
import { driverCodeOf, isPassing } from '../db/driver-errors.js';
import type { Logger } from '../logging/logger.js';
import {
  ApiError,
  createRequestInvalid,
  createTooLarge,
  createWrongContentType,
} from './api-error.js';

/** The one door for errors: a known refusal as it is, anything else as a bare 500 that is logged. */
export function createErrorAnswer(logger: Logger): ErrorRequestHandler {
  return (error: unknown, req, res, next) => {
    const refusal = error instanceof ApiError ? error : translate(error);
    if (refusal.status >= 500) logger.error({ err: error, url: req.url }, 'request failed');
    if (res.headersSent) {
      // Half an answer is out: closing the connection is the only way left to say that it failed.
      next(error);
      return;
    }
    const body: ErrorResponse = {
      error: {
        code: refusal.code,
        message: refusal.message,
        ...(refusal.details ? { details: [...refusal.details] } : {}),
      },
    };
    res.status(refusal.status).json(body);
  };
}

function translate(error: unknown): ApiError {
  if (error instanceof MulterError) return fromMulter(error);
  if (error instanceof URIError) return createRequestInvalid('The address is not valid.');
  const { type, status } = error as { type?: unknown; status?: unknown };
  if (typeof type === 'string' && typeof status === 'number' && status < 500)
    return fromBodyParser(type, status);
  if (driverCodeOf(error) === 'ENOSPC')
    return new ApiError(507, 'server.failed', 'There is no room left on the server’s disk.');
  if (isPassing(error))
    return new ApiError(503, 'server.failed', 'The database is busy or away. Try again shortly.');
  return new ApiError(
    500,
    'server.failed',
    'Something went wrong on the server. It has been noted; please try again.',
    { cause: error },
  );
}

function fromMulter(error: MulterError): ApiError {
  if (error.code === 'LIMIT_FILE_SIZE') return createTooLarge('The file is larger than allowed.');
  if (error.code === 'LIMIT_UNEXPECTED_FILE' || error.code === 'LIMIT_FILE_COUNT')
    return createRequestInvalid('Send one file, in the field “file”.');
  return createRequestInvalid('The form that was sent is not valid.');
}

/** Types of the body-parser package. */
function fromBodyParser(type: string, status: number): ApiError {
  if (type === 'entity.too.large') return createTooLarge('The request is larger than allowed.');
  if (status === 415) return createWrongContentType('The request’s encoding is not supported.');
  if (type === 'entity.parse.failed') return createRequestInvalid('The request is not valid JSON.');
  return createRequestInvalid('The request could not be read.');
}
