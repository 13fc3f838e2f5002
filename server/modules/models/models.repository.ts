import { and, desc, eq, inArray, isNotNull, max, sql } from 'drizzle-orm';
import type { ModelScale } from '../../../shared/api/model-scale.js';
import type { MendingChoices } from '../../../shared/jobs/mending-choices.js';
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
    createdAt: revisions.createdAt,
    sourceKey: revisions.sourceKey,
    proxyKey: revisions.proxyKey,
    choices: revisions.choices,
    isAccepted: revisions.isAccepted,
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
      const { createdAt, createdBy } = model;
      await db
        .insert(revisions)
        .values({ ...revision, modelId: model.id, number: 1, createdAt, createdBy });
    },

    /**
     * Adds a revision behind the newest one. The model's row is locked until the transaction ends, so
     * two of them get two numbers. @returns false when there is no such model (any more)
     */
    async addRevision(
      key: Key,
      revision: {
        id: string;
        fileName: string;
        fileBytes: number;
        sourceKey: string;
        scale: ModelScale;
        scaleReason: string;
        jobId: string;
        createdAt: Date;
        createdBy: string;
      },
    ): Promise<boolean> {
      const locked = await db
        .select({ id: models.id })
        .from(models)
        .where(isKey(key))
        .for('update');
      if (locked.length === 0) return false;
      const newest = await db
        .select({ number: max(revisions.number) })
        .from(revisions)
        .where(eq(revisions.modelId, key.id));
      const number = (newest[0]?.number ?? 0) + 1;
      await db.insert(revisions).values({ ...revision, modelId: key.id, number });
      return true;
    },

    /** All revisions of a model, the newest first. */
    listRevisions: (modelId: string) =>
      db
        .select({
          id: revisions.id,
          number: revisions.number,
          fileName: revisions.fileName,
          fileBytes: revisions.fileBytes,
          report: revisions.report,
          scale: revisions.scale,
          jobId: revisions.jobId,
          createdAt: revisions.createdAt,
          createdBy: sql<string>`coalesce(${revisions.createdBy}, ${models.createdBy})`,
        })
        .from(revisions)
        .innerJoin(models, eq(models.id, revisions.modelId))
        .where(eq(revisions.modelId, modelId))
        .orderBy(desc(revisions.number)),

    /** Puts a new inspection with other choices in the place of the last one. */
    async startMending(
      revisionId: string,
      next: { choices: MendingChoices; jobId: string },
    ): Promise<void> {
      await db
        .update(revisions)
        .set({ ...next, isAccepted: false })
        .where(eq(revisions.id, revisionId));
    },

    /** Goes back to the choices of the report that still stands. */
    async dropChoices(revisionId: string): Promise<void> {
      await db
        .update(revisions)
        .set({ choices: sql`json_extract(${revisions.report}, '$.choices')` })
        .where(eq(revisions.id, revisionId));
    },

    async accept(revisionId: string): Promise<void> {
      await db.update(revisions).set({ isAccepted: true }).where(eq(revisions.id, revisionId));
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
        .select({
          id: revisions.id,
          workshopId: models.workshopId,
          scaleConfirmed: revisions.scaleConfirmed,
          scaleReason: revisions.scaleReason,
          hasReport: isNotNull(revisions.report),
          jobId: revisions.jobId,
          solidKey: revisions.solidKey,
          viewKey: revisions.viewKey,
          thumbnailKey: revisions.thumbnailKey,
          proxyKey: revisions.proxyKey,
        })
        .from(revisions)
        .innerJoin(models, eq(models.id, revisions.modelId))
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
        proxyKey: string | null;
        choices: MendingChoices;
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
