import { and, count, desc, eq, inArray } from 'drizzle-orm';
import type { EnvelopeResponse } from '../../../shared/api/envelopes.contract.js';
import type { PlanRelease } from '../../../shared/api/plans.contract.js';
import type { Objectives, PlanOutput } from '../../../shared/jobs/plan-make.js';
import type { PlanWishes } from '../../../shared/jobs/plan-wishes.js';
import type { Db } from '../../platform/db/client.js';
import { plans } from './plans.table.js';

export type PlansRepository = ReturnType<typeof createPlansRepository>;
/** A plan without its result, which is large. */
export type PlanRow = Awaited<ReturnType<PlansRepository['list']>>[number];

interface Key {
  readonly id: string;
  readonly workshopId: string;
}

const summary = {
  id: plans.id,
  workshopId: plans.workshopId,
  modelId: plans.modelId,
  revisionId: plans.revisionId,
  number: plans.number,
  seed: plans.seed,
  envelope: plans.envelope,
  otherEnvelopes: plans.otherEnvelopes,
  wishes: plans.wishes,
  fromPlan: plans.fromPlan,
  millimetresPerUnit: plans.millimetresPerUnit,
  objectives: plans.objectives,
  jobId: plans.jobId,
  pieceCount: plans.pieceCount,
  allPassed: plans.allPassed,
  release: plans.release,
  archiveBytes: plans.archiveBytes,
  createdAt: plans.createdAt,
  createdBy: plans.createdBy,
};

const isKey = ({ id, workshopId }: Key) => and(eq(plans.id, id), eq(plans.workshopId, workshopId));

export function createPlansRepository({ db }: { db: Db }) {
  return {
    list: ({ workshopId, modelId }: { workshopId: string; modelId?: string | undefined }) =>
      db
        .select(summary)
        .from(plans)
        .where(
          and(
            eq(plans.workshopId, workshopId),
            modelId === undefined ? undefined : eq(plans.modelId, modelId),
          ),
        )
        .orderBy(desc(plans.createdAt), desc(plans.number), desc(plans.id)),

    async find(key: Key) {
      const rows = await db
        .select({ ...summary, result: plans.result })
        .from(plans)
        .where(isKey(key))
        .limit(1);
      return rows[0] ?? null;
    },

    async countByModel(modelIds: readonly string[]): Promise<Map<string, number>> {
      if (modelIds.length === 0) return new Map();
      const rows = await db
        .select({ modelId: plans.modelId, count: count() })
        .from(plans)
        .where(inArray(plans.modelId, [...modelIds]))
        .groupBy(plans.modelId);
      return new Map(rows.map((row) => [row.modelId, row.count]));
    },

    async countByRevision(revisionIds: readonly string[]): Promise<Map<string, number>> {
      if (revisionIds.length === 0) return new Map();
      const rows = await db
        .select({ revisionId: plans.revisionId, count: count() })
        .from(plans)
        .where(inArray(plans.revisionId, [...revisionIds]))
        .groupBy(plans.revisionId);
      return new Map(rows.map((row) => [row.revisionId, row.count]));
    },

    async add(plan: {
      id: string;
      workshopId: string;
      modelId: string;
      revisionId: string;
      number: number;
      seed: number;
      envelope: EnvelopeResponse;
      otherEnvelopes: EnvelopeResponse[];
      wishes: PlanWishes;
      fromPlan: number | null;
      millimetresPerUnit: number;
      jobId: string;
      createdAt: Date;
      createdBy: string;
    }): Promise<void> {
      await db.insert(plans).values(plan);
    },

    async storeRelease(key: Key, release: PlanRelease): Promise<void> {
      await db.update(plans).set({ release }).where(isKey(key));
    },

    /** @returns whether there was one */
    async remove(key: Key): Promise<boolean> {
      const [gone] = await db.delete(plans).where(isKey(key));
      return gone.affectedRows > 0;
    },

    /** Locks a plan until the transaction ends; null when it was deleted. */
    async lock(id: string) {
      const rows = await db
        .select({ id: plans.id })
        .from(plans)
        .where(eq(plans.id, id))
        .for('update');
      return rows[0] ?? null;
    },

    async storeResult(
      id: string,
      found: {
        result: PlanOutput;
        pieceCount: number;
        allPassed: boolean;
        objectives: Objectives | null;
        archiveBytes: number;
      },
    ): Promise<void> {
      await db.update(plans).set(found).where(eq(plans.id, id));
    },
  };
}
