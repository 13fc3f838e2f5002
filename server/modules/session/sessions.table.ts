import { index, mysqlTable } from 'drizzle-orm/mysql-core';
import { momentColumn, recordIdColumn } from '../../platform/db/columns.js';
import { users } from '../accounts/users.table.js';
import { workshops } from '../workshops/workshops.table.js';

/** One sign-in on one device: the family to which its refresh tokens belong. */
export const sessions = mysqlTable(
  'sessions',
  {
    id: recordIdColumn('id').primaryKey(),
    userId: recordIdColumn('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    workshopId: recordIdColumn('workshop_id')
      .notNull()
      .references(() => workshops.id, { onDelete: 'cascade' }),
    createdAt: momentColumn('created_at').notNull(),
    expiresAt: momentColumn('expires_at').notNull(),
    revokedAt: momentColumn('revoked_at'),
  },
  (table) => [
    index('sessions_user').on(table.userId),
    index('sessions_workshop').on(table.workshopId),
    index('sessions_expiry').on(table.expiresAt),
  ],
);
