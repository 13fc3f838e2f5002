import { boolean, mysqlTable, varchar } from 'drizzle-orm/mysql-core';
import { momentColumn, recordIdColumn } from '../../platform/db/columns.js';

export const workshops = mysqlTable('workshops', {
  id: recordIdColumn('id').primaryKey(),
  name: varchar('name', { length: 120 }).notNull(),
  isDemo: boolean('is_demo').notNull().default(false),
  createdAt: momentColumn('created_at').notNull(),
});
