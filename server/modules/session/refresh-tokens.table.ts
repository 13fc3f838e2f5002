import { char, index, mysqlTable } from 'drizzle-orm/mysql-core';
import { momentColumn, recordIdColumn } from '../../platform/db/columns.js';
import { sessions } from './sessions.table.js';

/** Refresh tokens by their SHA-256; the token itself is only in the person's cookie. */
export const refreshTokens = mysqlTable(
  'refresh_tokens',
  {
    tokenHash: char('token_hash', { length: 64 }).primaryKey(),
    sessionId: recordIdColumn('session_id')
      .notNull()
      .references(() => sessions.id, { onDelete: 'cascade' }),
    createdAt: momentColumn('created_at').notNull(),
    /** When it was exchanged for a new one. Its second use is a theft or a parallel tab. */
    spentAt: momentColumn('spent_at'),
  },
  (table) => [index('refresh_tokens_session').on(table.sessionId)],
);
