import { mayBePlanned } from '../../../shared/jobs/model-inspect.js';
import { type ModelScale } from '../../../shared/api/model-scale.js';
import { type MendingChoices, noChoices } from '../../../shared/jobs/mending-choices.js';
import type { Transact } from '../../platform/db/transaction.js';
import type { CreateId } from '../../platform/ids/create-id.js';
import type { FileStorage } from '../../platform/storage/disk-storage.js';
import { modelFolder, revisionFolder } from '../../platform/storage/storage-keys.js';
import type { WorkshopsRepository } from '../workshops/workshops.repository.js';
import type { JobRow, JobsRepository } from '../jobs/jobs.repository.js';
import { cleanFileName, modelNameOf } from './file-name.js';
import {
  createModelInUse,
  createModelNotFound,
  createModelNotReady,
  createNothingToAccept,
  createRevisionInUse,
} from './models.errors.js';
import type { ModelRow, ModelsRepository } from './models.repository.js';

export type ModelsService = ReturnType<typeof createModelsService>;

/** One revision of a model, for the list of them. */
export interface RevisionView {
  readonly revision: Awaited<ReturnType<ModelsRepository['listRevisions']>>[number];
  readonly createdByName: string;
  readonly planCount: number;
}

/** A model with what other modules know about it. */
export interface ModelView {
  readonly model: ModelRow;
  readonly job: JobRow;
  readonly createdByName: string;
  readonly planCount: number;
}

interface Key {
  readonly id: string;
  readonly workshopId: string;
}

/** A file that lies in the incoming folder. */
export interface ReceivedFile {
  readonly path: string;
  readonly fileName: string;
  readonly bytes: number;
}

const UNKNOWN_SCALE: ModelScale = { unit: 'mm', factor: 1, target: null };

export function createModelsService(deps: {
  models: ModelsRepository;
  jobs: JobsRepository;
  transact: Transact<{
    models: ModelsRepository;
    jobs: JobsRepository;
    workshops: WorkshopsRepository;
  }>;
  storage: FileStorage;
  namesOf: (userIds: readonly string[]) => Promise<Map<string, string>>;
  countPlans: (modelIds: readonly string[]) => Promise<Map<string, number>>;
  countPlansOf: (revisionIds: readonly string[]) => Promise<Map<string, number>>;
  clock: () => Date;
  createId: CreateId;
}) {
  const { models, jobs, storage, transact, clock, createId } = deps;

  async function withContext(rows: readonly ModelRow[]): Promise<ModelView[]> {
    const found = await jobs.findMany(rows.map((row) => row.revision.jobId));
    const jobOf = new Map(found.map((job) => [job.id, job]));
    const names = await deps.namesOf(rows.map((row) => row.createdBy));
    const planCounts = await deps.countPlans(rows.map((row) => row.id));
    return rows.flatMap((model) => {
      const job = jobOf.get(model.revision.jobId);
      if (!job) return []; // Deleted between two queries.
      const createdByName = names.get(model.createdBy) ?? '';
      return [{ model, job, createdByName, planCount: planCounts.get(model.id) ?? 0 }];
    });
  }

  async function find(key: Key): Promise<ModelRow> {
    const model = await models.find(key);
    if (!model) throw createModelNotFound();
    return model;
  }

  async function get(key: Key): Promise<ModelView> {
    const [view] = await withContext([await find(key)]);
    if (!view) throw createModelNotFound();
    return view;
  }

  return {
    list: async (workshopId: string) => withContext(await models.list(workshopId)),
    find,
    get,

    /**
     * Takes a received file in as a new model and queues its inspection. When anything fails
     * nothing of it stays: no row, no file.
     */
    async add(upload: {
      workshopId: string;
      userId: string;
      file: ReceivedFile;
      name?: string | undefined;
    }): Promise<Key> {
      const { workshopId, userId, file } = upload;
      const [id, revisionId, jobId] = [createId(), createId(), createId()];
      const fileName = cleanFileName(file.fileName);
      const folder = revisionFolder({ workshopId, modelId: id, revisionId });
      const sourceKey = sourceKeyOf(folder, fileName);
      await storage.takeIn(file.path, sourceKey);
      try {
        await transact(async (repos) => {
          const name = upload.name?.trim() || modelNameOf(fileName);
          await repos.models.add(
            { id, workshopId, name, createdAt: clock(), createdBy: userId },
            {
              id: revisionId,
              fileName,
              fileBytes: file.bytes,
              sourceKey,
              scale: UNKNOWN_SCALE,
              jobId,
            },
          );
          await repos.jobs.add({
            id: jobId,
            workshopId,
            kind: 'model.inspect',
            subjectId: revisionId,
            input: inspection({ sourceKey, fileName, folder, jobId, choices: noChoices }),
          });
        });
      } catch (error) {
        // Whatever it is, the file must not stay behind without its row.
        await storage.remove(modelFolder({ workshopId, modelId: id }));
        throw error;
      }
      return { id, workshopId };
    },

    /**
     * Takes a received file in as the next revision of a model and queues its inspection. A scale that a
     * person chose is taken over. @throws model.notFound
     */
    async addRevision(key: Key, upload: { userId: string; file: ReceivedFile }): Promise<void> {
      const { revision: last } = await find(key);
      const [revisionId, jobId] = [createId(), createId()];
      const fileName = cleanFileName(upload.file.fileName);
      const folder = revisionFolder({ workshopId: key.workshopId, modelId: key.id, revisionId });
      const sourceKey = sourceKeyOf(folder, fileName);
      await storage.takeIn(upload.file.path, sourceKey);
      try {
        await transact(async (repos) => {
          const isThere = await repos.models.addRevision(key, {
            id: revisionId,
            fileName,
            fileBytes: upload.file.bytes,
            sourceKey,
            scale: last.scaleConfirmed ? last.scale : UNKNOWN_SCALE,
            scaleReason: last.scaleConfirmed ? `Taken over from revision ${last.number}.` : '',
            jobId,
            createdAt: clock(),
            createdBy: upload.userId,
          });
          if (!isThere) throw createModelNotFound();
          await repos.jobs.add({
            id: jobId,
            workshopId: key.workshopId,
            kind: 'model.inspect',
            subjectId: revisionId,
            input: inspection({ sourceKey, fileName, folder, jobId, choices: noChoices }),
          });
        });
      } catch (error) {
        await storage.remove(folder);
        throw error;
      }
    },

    /** Every revision of a model, the newest first. */
    async revisions(key: Key): Promise<RevisionView[]> {
      const model = await find(key);
      const rows = await models.listRevisions(model.id);
      const names = await deps.namesOf(rows.map((row) => row.createdBy));
      const planCounts = await deps.countPlansOf(rows.map((row) => row.id));
      return rows.map((revision) => ({
        revision,
        createdByName: names.get(revision.createdBy) ?? '',
        planCount: planCounts.get(revision.id) ?? 0,
      }));
    },

    /**
     * Inspects the newest revision again with other choices; what was found before stands until then.
     * @throws model.notFound, model.notReady, model.inUse
     */
    async mend(key: Key, choices: MendingChoices): Promise<void> {
      const model = await find(key);
      const { revision } = model;
      const planCount = (await deps.countPlansOf([revision.id])).get(revision.id) ?? 0;
      if (planCount > 0) throw createRevisionInUse(planCount);
      const jobId = createId();
      const folder = revisionFolder({
        workshopId: key.workshopId,
        modelId: key.id,
        revisionId: revision.id,
      });
      await transact(async (repos) => {
        // Locked, so that two of them do not start two inspections.
        const locked = await repos.models.lockRevision(revision.id);
        if (!locked) throw createModelNotFound();
        const last = await repos.jobs.find({ id: locked.jobId, workshopId: key.workshopId });
        if (last && !last.settledAt) throw createModelNotReady();
        await repos.models.startMending(revision.id, { choices, jobId });
        await repos.jobs.add({
          id: jobId,
          workshopId: key.workshopId,
          kind: 'model.inspect',
          subjectId: revision.id,
          input: inspection({ ...revision, folder, jobId, choices }),
        });
        await repos.jobs.remove(locked.jobId);
      });
    },

    /** @throws model.notFound, model.notPlannable when there is nothing to accept */
    async change(
      key: Key,
      changes: {
        name?: string | undefined;
        scale?: ModelScale | undefined;
        accept?: true | undefined;
      },
    ): Promise<void> {
      const { revision } = await find(key);
      const { scale } = changes;
      if (changes.accept && !isAcceptable(revision)) throw createNothingToAccept();
      await transact(async (repos) => {
        if (changes.name !== undefined) await repos.models.rename(key, changes.name);
        if (changes.accept) await repos.models.accept(revision.id);
        if (!scale) return;
        await repos.models.confirmScale(revision.id, scale);
        // What a file states itself says nothing about other files.
        if (!revision.report?.fileUnit)
          await repos.workshops.rememberUnit(key.workshopId, {
            unit: scale.unit,
            factor: scale.factor,
          });
      });
    },

    /**
     * Removes a model with its files. While plans are made of it, it stays. An inspection that
     * still runs is told to stop; what it writes meanwhile goes when its job is settled.
     * @throws model.inUse
     */
    async remove(key: Key): Promise<void> {
      const model = await find(key);
      const planCount = (await deps.countPlans([key.id])).get(key.id) ?? 0;
      if (planCount > 0) throw createModelInUse(planCount);
      const jobIds = (await models.listRevisions(model.id)).map((revision) => revision.jobId);
      await transact(async (repos) => {
        await repos.models.remove(key);
        for (const id of jobIds)
          await repos.jobs.removeOrCancel({ id, workshopId: key.workshopId });
      });
      await storage.remove(modelFolder({ workshopId: key.workshopId, modelId: key.id }));
    },
  };
}

/** Where a file is kept as it came; its ending is ours, whatever the file is called. */
function sourceKeyOf(folder: string, fileName: string): string {
  const ending = /\.(obj|3mf)$/i.exec(fileName)?.[1]?.toLowerCase() ?? 'stl';
  return `${folder}/source.${ending}`;
}

/** Every inspection writes to a folder of its own, so that an earlier one can stand meanwhile. */
function inspection(order: {
  sourceKey: string;
  fileName: string;
  folder: string;
  jobId: string;
  choices: MendingChoices;
}) {
  const { sourceKey, fileName, folder, jobId, choices } = order;
  return { sourceKey, fileName, choices, outputPrefix: `${folder}/inspection-${jobId}` };
}

function isAcceptable({ report, solidKey }: ModelRow['revision']): boolean {
  return report !== null && !report.plannable && solidKey !== null && mayBePlanned(report, true);
}
