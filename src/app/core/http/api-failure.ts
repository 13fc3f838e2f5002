import { HttpErrorResponse } from '@angular/common/http';
import { errorResponse, type ErrorCode } from '../../../../shared/api/error-codes.js';

/** Failures that no server answered: the network, an answer we do not understand, our own abort. */
export type ClientFailureCode = 'network.unreachable' | 'answer.unexpected';
export type FailureCode = ErrorCode | ClientFailureCode;
export interface FieldFailure {
  /** Dotted path into the request, for example `heightMm`. */
  readonly path: string;
  readonly message: string;
}

/** Every way in which a request can fail, as one type: switch on `code`, show `message`. */
export class ApiFailure extends Error {
  override readonly name = 'ApiFailure';
  constructor(
    readonly code: FailureCode,
    message: string,
    readonly status: number,
    readonly details: readonly FieldFailure[] = [],
    cause?: unknown,
  ) {
    super(message, { cause });
  }
}

/** Turns whatever HttpClient threw into an ApiFailure. */
export function toApiFailure(error: unknown): ApiFailure {
  if (error instanceof ApiFailure) return error;
  if (!(error instanceof HttpErrorResponse)) {
    return new ApiFailure('answer.unexpected', unexpectedAnswer, 0, [], error);
  }
  if (error.status === 0) {
    const message = 'The server cannot be reached. Check the connection, then try again.';
    return new ApiFailure('network.unreachable', message, 0, [], error);
  }
  const answer = errorResponse.safeParse(asObject(error.error));
  if (answer.success) {
    const { code, message, details } = answer.data.error;
    return new ApiFailure(code, message, error.status, details, error);
  }
  return new ApiFailure('answer.unexpected', unexpectedAnswer, error.status, [], error);
}

/** The sentence to show for any error, expected or not. */
export function sentenceFor(error: unknown): string {
  return error instanceof ApiFailure
    ? error.message
    : 'Something went wrong here. Please try again.';
}

const unexpectedAnswer = 'The server gave an answer that could not be read. Please try again.';

/** A failed request for a file or a picture carries its JSON as text or as bytes. */
function asObject(body: unknown): unknown {
  const text = body instanceof ArrayBuffer ? new TextDecoder().decode(body) : body;
  if (typeof text !== 'string') return text;
  try {
    return JSON.parse(text);
  } catch {
    // Expected: a proxy's HTML page instead of our JSON.
    return null;
  }
}
