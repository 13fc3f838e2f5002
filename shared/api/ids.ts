import * as z from 'zod';

/** Identifier of a stored record: 20 lower-case letters and digits, made by the server. */
export const recordId = z.string().regex(/^[a-z0-9]{20}$/, 'is not an identifier');
