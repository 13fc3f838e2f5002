import {
  bigint,
  boolean,
  double,
  index,
  int,
  json,
  mysqlTable,
  unique,
} from 'drizzle-orm/mysql-core';
import type { EnvelopeResponse } from '../../../shared/api/envelopes.contract.js';
import type { PlanRelease } from '../../../shared/api/plans.contract.js';
import type { Objectives, PlanOutput } from '../../../shared/jobs/plan-make.js';
import type { PlanWishes } from '../../../shared/jobs/plan-wishes.js';
import { momentColumn, recordIdColumn } from '../../platform/db/columns.js';
import { users } from '../accounts/users.table.js';
import { models } from '../models/models.table.js';
import { revisions } from '../models/revisions.table.js';
import { workshops } from '../workshops/workshops.table.js';

export const plans = mysqlTable(
  'plans',
  {
    id: recordIdColumn('id').primaryKey(),
    workshopId: recordIdColumn('workshop_id')
      .notNull()
      .references(() => workshops.id, { onDelete: 'cascade' }),
    modelId: recordIdColumn('model_id')
      .notNull()
      .references(() => models.id),
    revisionId: recordIdColumn('revision_id')
      .notNull()
      .references(() => revisions.id),
    /** Counted per model, from 1. */
    number: int('number').notNull(),
    seed: int('seed').notNull(),
    /** The envelope as it was: later edits do not change a plan that was made. */
    envelope: json('envelope').$type<EnvelopeResponse>().notNull(),
    /** Further envelopes, as they were; null for plans made before there could be any. */
    otherEnvelopes: json('other_envelopes').$type<EnvelopeResponse[]>(),
    /** What was asked of it; null for plans made before anything could be. */
    wishes: json('wishes').$type<PlanWishes>(),
    /** Number of the plan among whose offers it was found. */
    fromPlan: int('from_plan'),
    millimetresPerUnit: double('millimetres_per_unit').notNull(),
    jobId: recordIdColumn('job_id').notNull(),
    /** Null until the job is settled as done. */
    result: json('result').$type<PlanOutput>(),
    pieceCount: int('piece_count'),
    allPassed: boolean('all_passed'),
    objectives: json('objectives').$type<Objectives>(),
    /** Who wanted the files of a plan whose proof failed, and why. */
    release: json('release').$type<PlanRelease>(),
    archiveBytes: bigint('archive_bytes', { mode: 'number', unsigned: true }),
    createdAt: momentColumn('created_at').notNull(),
    createdBy: recordIdColumn('created_by')
      .notNull()
      .references(() => users.id),
  },
  (table) => [
    unique('plans_number').on(table.modelId, table.number),
    index('plans_list').on(table.workshopId, table.createdAt),
    index('plans_revision').on(table.revisionId),
    index('plans_creator').on(table.createdBy),
  ],
);
