import { index, mysqlTable, primaryKey, varchar } from 'drizzle-orm/mysql-core';
import type { Role } from '../../../shared/api/roles.js';
import { momentColumn, recordIdColumn } from '../../platform/db/columns.js';
import { users } from '../accounts/users.table.js';
import { workshops } from './workshops.table.js';

/** Who belongs to which workshop, and as what. */
export const memberships = mysqlTable(
  'memberships',
  {
    userId: recordIdColumn('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    workshopId: recordIdColumn('workshop_id')
      .notNull()
      .references(() => workshops.id, { onDelete: 'cascade' }),
    role: varchar('role', { length: 20 }).$type<Role>().notNull(),
    createdAt: momentColumn('created_at').notNull(),
  },
  (table) => [
    primaryKey({ name: 'memberships_pk', columns: [table.userId, table.workshopId] }),
    index('memberships_workshop').on(table.workshopId),
  ],
);
