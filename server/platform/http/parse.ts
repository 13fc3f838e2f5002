import type { Request } from 'express';
import type { z } from 'zod';
import { recordId } from '../../../shared/api/ids.js';
import {
  type ApiError,
  createNothingHere,
  createRequestInvalid,
  createWrongContentType,
} from './api-error.js';

/**
 * The value as the schema reads it.
 * @throws request.invalid whose message is the first fault and whose details are all of them
 */
export function parse<S extends z.ZodType>(schema: S, value: unknown): z.output<S> {
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  const details = result.error.issues.map((issue) => ({
    path: issue.path.join('.'),
    message: sentence(issue.message, issue.path.join('.')),
  }));
  throw createRequestInvalid(details[0]?.message ?? 'The request is not valid.', details);
}

/** Zod's own texts start with what is wrong; ours are sentences already. */
function sentence(message: string, path: string): string {
  const isGeneric = /^(Invalid|Too|Unrecognized)\b/.test(message);
  return isGeneric && path ? `${path}: ${message}` : message;
}

/** The JSON body of a request. @throws 415 when something else was sent, 400 when it is not valid */
export function parseBody<S extends z.ZodType>(schema: S, req: Request): z.output<S> {
  const body: unknown = req.body;
  if (body === undefined && hasBody(req)) throw createWrongContentType('Send the data as JSON.');
  return parse(schema, body ?? {});
}

/** Whether the request carries bytes: a body without a length is sent in chunks. */
function hasBody(req: Request): boolean {
  return Number(req.headers['content-length'] ?? 0) > 0 || 'transfer-encoding' in req.headers;
}

/** The `:id` of the address. What is no identifier cannot exist, so it is not found. */
export function idOf(req: Request, notFound: () => ApiError = createNothingHere): string {
  const result = recordId.safeParse(req.params['id']);
  if (!result.success) throw notFound();
  return result.data;
}
