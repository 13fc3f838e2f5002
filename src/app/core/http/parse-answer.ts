import { map, type OperatorFunction } from 'rxjs';
import type * as z from 'zod';
import { ApiFailure } from './api-failure';

/** Checks an answer against its contract at the door, so that everything inside may trust its types. */
export function parseAnswer<T>(schema: z.ZodType<T>): OperatorFunction<unknown, T> {
  return map((body) => {
    const parsed = schema.safeParse(body);
    if (parsed.success) return parsed.data;
    const message =
      'The server gave an answer this page does not understand. Reload the page; it may be older than the server.';
    throw new ApiFailure('answer.unexpected', message, 200, [], parsed.error);
  });
}
