import { and, desc, eq, inArray, sql } from 'drizzle-orm';
import type { ModelScale } from '../../../shared/api/model-scale.js';
import type { MeshReport } from '../../../shared/jobs/model-inspect.js';
import type { Db } from '../../platform/db/client.js';
import { models } from './models.table.js';
import { revisions } from './revisions.table.js';

export type ModelsRepository = ReturnType<typeof createModelsRepository>;
export type ModelRow = Awaited<ReturnType<typeof selectFrom>>[number];

interface Key {
  readonly id: string;
  readonly workshopId: string;
}

const columns = {
  id: models.id,
  name: models.name,
  createdAt: models.createdAt,
  createdBy: models.createdBy,
  revision: {
    id: revisions.id,
    number: revisions.number,
    fileName: revisions.fileName,
    fileBytes: revisions.fileBytes,
    report: revisions.report,
    scale: revisions.scale,
    scaleConfirmed: revisions.scaleConfirmed,
    scaleReason: revisions.scaleReason,
    solidKey: revisions.solidKey,
    viewKey: revisions.viewKey,
    thumbnailKey: revisions.thumbnailKey,
    viewTriangles: revisions.viewTriangles,
    jobId: revisions.jobId,
  },
};

/** Models with their newest revision. */
const selectFrom = (db: Db) =>
  db
    .select(columns)
    .from(models)
    .innerJoin(
      revisions,
      and(
        eq(revisions.modelId, models.id),
        eq(
          revisions.number,
          sql`(select max(newest.number) from revisions newest where newest.model_id = ${models.id})`,
        ),
      ),
    );

const isKey = ({ id, workshopId }: Key) =>
  and(eq(models.id, id), eq(models.workshopId, workshopId));

export function createModelsRepository({ db }: { db: Db }) {
  return {
    list: (workshopId: string) =>
      selectFrom(db)
        .where(eq(models.workshopId, workshopId))
        .orderBy(desc(models.createdAt), desc(models.id)),

    async find(key: Key): Promise<ModelRow | null> {
      return (await selectFrom(db).where(isKey(key)).limit(1))[0] ?? null;
    },

    async add(
      model: {
        id: string;
        workshopId: string;
        name: string;
        createdAt: Date;
        createdBy: string;
      },
      revision: {
        id: string;
        fileName: string;
        fileBytes: number;
        sourceKey: string;
        scale: ModelScale;
        jobId: string;
      },
    ): Promise<void> {
      await db.insert(models).values(model);
      await db
        .insert(revisions)
        .values({ ...revision, modelId: model.id, number: 1, createdAt: model.createdAt });
    },

    async rename(key: Key, name: string): Promise<void> {
      await db.update(models).set({ name }).where(isKey(key));
    },

    /** A person's choice of scale; it is no guess any more. */
    async confirmScale(revisionId: string, scale: ModelScale): Promise<void> {
      await db
        .update(revisions)
        .set({ scale, scaleConfirmed: true, scaleReason: '' })
        .where(eq(revisions.id, revisionId));
    },

    /** Removes a model with its revisions. @returns whether there was one */
    async remove(key: Key): Promise<boolean> {
      const [gone] = await db.delete(models).where(isKey(key));
      return gone.affectedRows > 0;
    },

    /** Locks a revision until the transaction ends; null when its model was deleted. */
    async lockRevision(id: string) {
      const rows = await db
        .select({ id: revisions.id, scaleConfirmed: revisions.scaleConfirmed })
        .from(revisions)
        .where(eq(revisions.id, id))
        .for('update');
      return rows[0] ?? null;
    },

    /** Stores what the inspection found. A scale is given only while it is still a guess. */
    async storeInspection(
      revisionId: string,
      found: {
        report: MeshReport;
        solidKey: string | null;
        viewKey: string | null;
        thumbnailKey: string | null;
        viewTriangles: number;
        scale?: ModelScale;
        scaleReason?: string;
      },
    ): Promise<void> {
      await db.update(revisions).set(found).where(eq(revisions.id, revisionId));
    },

    /** Gives the next plan number of a model and locks it. Null when the model is not there. */
    async nextPlanNumber(key: Key): Promise<number | null> {
      const rows = await db
        .select({ last: models.lastPlanNumber })
        .from(models)
        .where(isKey(key))
        .for('update');
      if (!rows[0]) return null;
      const number = rows[0].last + 1;
      await db.update(models).set({ lastPlanNumber: number }).where(isKey(key));
      return number;
    },

    /** Model name and revision number by revision, for lists of plans. */
    async describeRevisions(revisionIds: readonly string[]) {
      if (revisionIds.length === 0) return new Map<string, { name: string; number: number }>();
      const rows = await db
        .select({ id: revisions.id, name: models.name, number: revisions.number })
        .from(revisions)
        .innerJoin(models, eq(models.id, revisions.modelId))
        .where(inArray(revisions.id, [...new Set(revisionIds)]));
      return new Map(rows.map((row) => [row.id, { name: row.name, number: row.number }]));
    },
  };
}
