import { sql } from 'drizzle-orm';
import {
  boolean,
  char,
  double,
  index,
  int,
  json,
  mysqlTable,
  varchar,
} from 'drizzle-orm/mysql-core';
import type { JobError, JobName, JobState } from '../../../shared/jobs/job-map.js';
import { momentColumn, recordIdColumn } from '../../platform/db/columns.js';

const now = sql`CURRENT_TIMESTAMP(3)`;

/**
 * The queue. The server adds rows, asks to cancel and settles what is final; worker processes claim
 * rows with SQL of their own. No foreign keys: a row outlives its subject until it is settled.
 */
export const jobs = mysqlTable(
  'jobs',
  {
    id: recordIdColumn('id').primaryKey(),
    workshopId: recordIdColumn('workshop_id').notNull(),
    kind: varchar('kind', { length: 40 }).$type<JobName>().notNull(),
    /** The revision or plan that waits for the result. */
    subjectId: recordIdColumn('subject_id').notNull(),
    input: json('input').notNull(),
    state: varchar('state', { length: 12 }).$type<JobState>().notNull(),
    stage: varchar('stage', { length: 120 }).notNull().default(''),
    fraction: double('fraction').notNull().default(0),
    output: json('output'),
    error: json('error').$type<JobError>(),
    attempts: int('attempts').notNull().default(0),
    /** Someone wants the job to end with the best it has. */
    enoughRequested: boolean('enough_requested').notNull().default(false),
    cancelRequested: boolean('cancel_requested').notNull().default(false),
    leaseToken: char('lease_token', { length: 36 }),
    leaseUntil: momentColumn('lease_until'),
    runAfter: momentColumn('run_after').notNull().default(now),
    createdAt: momentColumn('created_at').notNull().default(now),
    startedAt: momentColumn('started_at'),
    finishedAt: momentColumn('finished_at'),
    /** When the server stored the result with its subject; a final job is shown as final only then. */
    settledAt: momentColumn('settled_at'),
  },
  (table) => [
    index('jobs_claim').on(table.state, table.runAfter, table.id),
    index('jobs_lease').on(table.state, table.leaseUntil),
    index('jobs_settle').on(table.settledAt, table.state),
    index('jobs_subject').on(table.subjectId),
  ],
);
