import { bigint, boolean, int, json, mysqlTable, unique, varchar } from 'drizzle-orm/mysql-core';
import type { ModelScale } from '../../../shared/api/model-scale.js';
import type { MendingChoices } from '../../../shared/jobs/mending-choices.js';
import type { MeshReport } from '../../../shared/jobs/model-inspect.js';
import { momentColumn, recordIdColumn } from '../../platform/db/columns.js';
import { users } from '../accounts/users.table.js';
import { models } from './models.table.js';

/** A model's geometry as it was uploaded. Keys point into the file storage. */
export const revisions = mysqlTable(
  'revisions',
  {
    id: recordIdColumn('id').primaryKey(),
    modelId: recordIdColumn('model_id')
      .notNull()
      .references(() => models.id, { onDelete: 'cascade' }),
    number: int('number').notNull(),
    fileName: varchar('file_name', { length: 255 }).notNull(),
    fileBytes: bigint('file_bytes', { mode: 'number', unsigned: true }).notNull(),
    sourceKey: varchar('source_key', { length: 200 }).notNull(),
    /** Null until the inspection is settled. */
    report: json('report').$type<MeshReport>(),
    solidKey: varchar('solid_key', { length: 200 }),
    viewKey: varchar('view_key', { length: 200 }),
    thumbnailKey: varchar('thumbnail_key', { length: 200 }),
    proxyKey: varchar('proxy_key', { length: 200 }),
    /** What was decided about the file; those of the report while no job runs. */
    choices: json('choices').$type<MendingChoices>(),
    /** Whether a person took the solid although mending changed it. */
    isAccepted: boolean('is_accepted').notNull().default(false),
    viewTriangles: int('view_triangles').notNull().default(0),
    scale: json('scale').$type<ModelScale>().notNull(),
    scaleConfirmed: boolean('scale_confirmed').notNull().default(false),
    scaleReason: varchar('scale_reason', { length: 300 }).notNull().default(''),
    jobId: recordIdColumn('job_id').notNull(),
    createdAt: momentColumn('created_at').notNull(),
    /** Null for those of before this was kept: then it is the model's. */
    createdBy: recordIdColumn('created_by').references(() => users.id),
  },
  (table) => [unique('revisions_number').on(table.modelId, table.number)],
);
