import * as z from 'zod';
import { recordId } from './ids.js';
import { roleSchema } from './roles.js';

export const signInRequest = z.object({
  email: z.string().trim().min(3).max(254),
  password: z.string().min(1).max(200),
});
export type SignInRequest = z.infer<typeof signInRequest>;

/** Who is signed in, in which workshop, as what. Tokens travel in httpOnly cookies only. */
export const sessionResponse = z.object({
  user: z.object({ id: recordId, name: z.string(), email: z.string(), isDemo: z.boolean() }),
  workshop: z.object({ id: recordId, name: z.string(), isDemo: z.boolean() }),
  role: roleSchema,
});
export type SessionResponse = z.infer<typeof sessionResponse>;

/** Shown on the sign-in page; empty unless the demo workshop was seeded. */
export const demoAccountsResponse = z.object({
  accounts: z.array(
    z.object({ email: z.string(), password: z.string(), role: roleSchema, name: z.string() }),
  ),
});
export type DemoAccountsResponse = z.infer<typeof demoAccountsResponse>;
