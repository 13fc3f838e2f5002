import { eq, inArray } from 'drizzle-orm';
import type { Db } from '../../platform/db/client.js';
import { users } from './users.table.js';

export type AccountsRepository = ReturnType<typeof createAccountsRepository>;

export interface NewUser {
  readonly id: string;
  readonly email: string;
  readonly name: string;
  readonly passwordHash: string;
  readonly isDemo: boolean;
  readonly createdAt: Date;
}

const columns = {
  id: users.id,
  email: users.email,
  name: users.name,
  passwordHash: users.passwordHash,
  isDemo: users.isDemo,
};

export function createAccountsRepository({ db }: { db: Db }) {
  return {
    async findByEmail(email: string) {
      const rows = await db.select(columns).from(users).where(eq(users.email, email)).limit(1);
      // The collation calls é and e equal; an address that is not exactly this one is another's.
      return rows.find((user) => user.email === email) ?? null;
    },

    async findById(id: string) {
      const rows = await db.select(columns).from(users).where(eq(users.id, id)).limit(1);
      return rows[0] ?? null;
    },

    /** Names of people for "made by"; someone who is gone has no entry. */
    async namesOf(ids: readonly string[]): Promise<Map<string, string>> {
      if (ids.length === 0) return new Map();
      const rows = await db
        .select({ id: users.id, name: users.name })
        .from(users)
        .where(inArray(users.id, [...new Set(ids)]));
      return new Map(rows.map((row) => [row.id, row.name]));
    },

    async add(user: NewUser): Promise<void> {
      await db.insert(users).values({ ...user, email: normalEmail(user.email) });
    },
  };
}

/** How an address is stored and compared. */
export function normalEmail(email: string): string {
  return email.trim().toLowerCase();
}
