import { compare, hash } from 'bcryptjs';

const COST = 10;
/** A hash of a random text that nobody knows, made with the same cost as every other. */
const NOBODY = '$2b$10$1MVom6UBUeAUr9Tyg0BBmeGttKOA6pf2abezoGV6EAJYCIA8eLrtG';

export function hashPassword(password: string): Promise<string> {
  return hash(password, COST);
}

/**
 * Whether the password belongs to the hash. Without a hash (no such account) it takes as long and
 * says no, so that the time tells nothing about who has an account.
 */
export async function isRightPassword(password: string, known: string | null): Promise<boolean> {
  const matches = await compare(password, known ?? NOBODY);
  return known !== null && matches;
}
