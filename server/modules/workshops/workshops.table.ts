import { boolean, json, mysqlTable, varchar } from 'drizzle-orm/mysql-core';
import type { UsualUnit } from '../../../shared/api/model-scale.js';
import { momentColumn, recordIdColumn } from '../../platform/db/columns.js';

export const workshops = mysqlTable('workshops', {
  id: recordIdColumn('id').primaryKey(),
  name: varchar('name', { length: 120 }).notNull(),
  isDemo: boolean('is_demo').notNull().default(false),
  createdAt: momentColumn('created_at').notNull(),
  /** The unit that a person chose last for a file that states none. */
  usualUnit: json('usual_unit').$type<UsualUnit>(),
});
