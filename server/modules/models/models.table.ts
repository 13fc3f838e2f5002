import { index, int, mysqlTable, varchar } from 'drizzle-orm/mysql-core';
import { momentColumn, recordIdColumn } from '../../platform/db/columns.js';
import { users } from '../accounts/users.table.js';
import { workshops } from '../workshops/workshops.table.js';

export const models = mysqlTable(
  'models',
  {
    id: recordIdColumn('id').primaryKey(),
    workshopId: recordIdColumn('workshop_id')
      .notNull()
      .references(() => workshops.id, { onDelete: 'cascade' }),
    name: varchar('name', { length: 120 }).notNull(),
    createdAt: momentColumn('created_at').notNull(),
    createdBy: recordIdColumn('created_by')
      .notNull()
      .references(() => users.id),
    /** Number of the newest plan: never given twice, even after one was deleted. */
    lastPlanNumber: int('last_plan_number').notNull().default(0),
  },
  (table) => [
    index('models_list').on(table.workshopId, table.createdAt),
    index('models_creator').on(table.createdBy),
  ],
);
