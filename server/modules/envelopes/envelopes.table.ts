import { double, mysqlTable, unique, varchar } from 'drizzle-orm/mysql-core';
import { momentColumn, recordIdColumn } from '../../platform/db/columns.js';
import { workshops } from '../workshops/workshops.table.js';

/** Build volumes as the shop lead saved them. Width and depth or diameter, after the shape. */
export const envelopes = mysqlTable(
  'envelopes',
  {
    id: recordIdColumn('id').primaryKey(),
    workshopId: recordIdColumn('workshop_id')
      .notNull()
      .references(() => workshops.id, { onDelete: 'cascade' }),
    name: varchar('name', { length: 80 }).notNull(),
    shape: varchar('shape', { length: 12 }).$type<'rectangular' | 'round'>().notNull(),
    widthMm: double('width_mm'),
    depthMm: double('depth_mm'),
    diameterMm: double('diameter_mm'),
    heightMm: double('height_mm').notNull(),
    marginMm: double('margin_mm').notNull(),
    nozzleMm: double('nozzle_mm').notNull(),
    layerHeightMm: double('layer_height_mm').notNull(),
    createdAt: momentColumn('created_at').notNull(),
    updatedAt: momentColumn('updated_at').notNull(),
  },
  (table) => [unique('envelopes_name').on(table.workshopId, table.name)],
);
