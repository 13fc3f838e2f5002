import { boolean, mysqlTable, varchar } from 'drizzle-orm/mysql-core';
import { momentColumn, recordIdColumn } from '../../platform/db/columns.js';

export const users = mysqlTable('users', {
  id: recordIdColumn('id').primaryKey(),
  /** Lower case; compared without case and accents by the collation as well. */
  email: varchar('email', { length: 254 }).notNull().unique('users_email'),
  name: varchar('name', { length: 120 }).notNull(),
  passwordHash: varchar('password_hash', { length: 100 }).notNull(),
  isDemo: boolean('is_demo').notNull().default(false),
  createdAt: momentColumn('created_at').notNull(),
});
