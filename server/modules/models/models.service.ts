import { type ModelScale } from '../../../shared/api/model-scale.js';
import { noChoices } from '../../../shared/jobs/mending-choices.js';
import type { Transact } from '../../platform/db/transaction.js';
import type { CreateId } from '../../platform/ids/create-id.js';
import type { FileStorage } from '../../platform/storage/disk-storage.js';
import { modelFolder, revisionFolder } from '../../platform/storage/storage-keys.js';
import type { JobRow, JobsRepository } from '../jobs/jobs.repository.js';
import { cleanFileName, modelNameOf } from './file-name.js';
import { createModelInUse, createModelNotFound } from './models.errors.js';
import type { ModelRow, ModelsRepository } from './models.repository.js';

export type ModelsService = ReturnType<typeof createModelsService>;

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
  transact: Transact<{ models: ModelsRepository; jobs: JobsRepository }>;
  storage: FileStorage;
  namesOf: (userIds: readonly string[]) => Promise<Map<string, string>>;
  countPlans: (modelIds: readonly string[]) => Promise<Map<string, number>>;
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
      const outputPrefix = revisionFolder({ workshopId, modelId: id, revisionId });
      const sourceKey = `${outputPrefix}/source.stl`;
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
            input: { sourceKey, fileName, outputPrefix, choices: noChoices },
          });
        });
      } catch (error) {
        // Whatever it is, the file must not stay behind without its row.
        await storage.remove(modelFolder({ workshopId, modelId: id }));
        throw error;
      }
      return { id, workshopId };
    },

    async change(
      key: Key,
      changes: { name?: string | undefined; scale?: ModelScale | undefined },
    ): Promise<void> {
      const model = await find(key);
      await transact(async (repos) => {
        if (changes.name !== undefined) await repos.models.rename(key, changes.name);
        if (changes.scale) await repos.models.confirmScale(model.revision.id, changes.scale);
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
      const { jobId } = model.revision;
      await transact(async (repos) => {
        await repos.models.remove(key);
        await repos.jobs.removeOrCancel({ id: jobId, workshopId: key.workshopId });
      });
      await storage.remove(modelFolder({ workshopId: key.workshopId, modelId: key.id }));
    },
  };
}
