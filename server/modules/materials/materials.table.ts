import { int, json, mysqlTable, unique, varchar } from 'drizzle-orm/mysql-core';
import type { MaterialProfile } from '../../../shared/jobs/material-profile.js';
import { momentColumn, recordIdColumn } from '../../platform/db/columns.js';
import { workshops } from '../workshops/workshops.table.js';

/** What workshops print and glue with, as the shop lead saved it. */
export const materials = mysqlTable(
  'materials',
  {
    id: recordIdColumn('id').primaryKey(),
    workshopId: recordIdColumn('workshop_id')
      .notNull()
      .references(() => workshops.id, { onDelete: 'cascade' }),
    /** The profile's own name, unique in the workshop. */
    name: varchar('name', { length: 80 }).notNull(),
    profile: json('profile').$type<MaterialProfile>().notNull(),
    version: int('version').notNull(),
    createdAt: momentColumn('created_at').notNull(),
    updatedAt: momentColumn('updated_at').notNull(),
  },
  (table) => [unique('materials_name').on(table.workshopId, table.name)],
);
