import { dirname } from 'node:path';
import { jobSchemas } from '../shared/jobs/job-map.js';
import { createEnvelopesRoutes } from './modules/envelopes/envelopes.router.js';
import { createEnvelopesService } from './modules/envelopes/envelopes.service.js';
import { createJobMonitor } from './modules/jobs/job-monitor.js';
import { createJobSettler } from './modules/jobs/job-settler.js';
import { createJobsRoutes } from './modules/jobs/jobs.router.js';
import type { FinalJob } from './modules/jobs/jobs.repository.js';
import { createMaterialsRoutes } from './modules/materials/materials.router.js';
import { createMaterialsService } from './modules/materials/materials.service.js';
import { settleInspection } from './modules/models/inspect-settlement.js';
import { createModelsRoutes } from './modules/models/models.router.js';
import { createModelsService } from './modules/models/models.service.js';
import { createUploadReceiver } from './modules/models/receive-upload.js';
import { settlePlan } from './modules/plans/plan-settlement.js';
import { createPlansRoutes } from './modules/plans/plans.router.js';
import { createPlansService } from './modules/plans/plans.service.js';
import { createSessionRoutes } from './modules/session/session.router.js';
import { createSessionService } from './modules/session/session.service.js';
import { createSignInLimits, type SignInLimits } from './modules/session/sign-in-limits.js';
import type { Db } from './platform/db/client.js';
import type { Route } from './platform/http/routes.js';
import type { CreateId } from './platform/ids/create-id.js';
import type { Logger } from './platform/logging/logger.js';
import type { FileStorage } from './platform/storage/disk-storage.js';
import { createRepositories, createTransact } from './repositories.js';
import { demoAccounts } from './seed/demo-accounts.js';

export interface Dependencies {
  readonly db: Db;
  readonly storage: FileStorage;
  readonly secret: string;
  readonly logger: Logger;
  readonly clock: () => Date;
  readonly createId: CreateId;
  readonly maxModelBytes: number;
  readonly signInLimits: SignInLimits;
}

export type Product = ReturnType<typeof compose>;

/** The composition root: every service, wired once. Nobody else calls a constructor of a service. */
export function compose(deps: Dependencies) {
  const { db, storage, secret, logger, clock, createId } = deps;
  const repos = createRepositories(db);
  const transact = createTransact(db);
  const namesOf = repos.accounts.namesOf;

  const sessions = createSessionService({ ...repos, secret, clock, createId });
  const envelopes = createEnvelopesService({ envelopes: repos.envelopes, clock, createId });
  const materials = createMaterialsService({ materials: repos.materials, clock, createId });
  const models = createModelsService({
    models: repos.models,
    jobs: repos.jobs,
    countPlans: repos.plans.countByModel,
    countPlansOf: repos.plans.countByRevision,
    transact,
    storage,
    namesOf,
    clock,
    createId,
  });
  const plans = createPlansService({
    plans: repos.plans,
    jobs: repos.jobs,
    models: repos.models,
    findModel: models.find,
    findEnvelope: envelopes.get,
    findMaterial: materials.get,
    transact,
    storage,
    namesOf,
    clock,
    createId,
  });

  const settler = createJobSettler({
    jobs: repos.jobs,
    transact,
    settlements: { 'model.inspect': settleInspection, 'plan.make': settlePlan },
    removeFilesOf: (job) => storage.remove(folderOf(job)),
    removeFile: (key) => storage.remove(key),
    logger,
  });
  const monitor = createJobMonitor({ jobs: repos.jobs, settler, logger });

  const routes: Route[] = [
    {
      method: 'get',
      path: '/api/health',
      access: 'public',
      handle: (_req, res) => {
        res.json({ ok: true });
      },
    },
    ...createSessionRoutes({
      sessions,
      secret,
      signInLimits: createSignInLimits(deps.signInLimits),
      demoAccounts: async () => ((await repos.workshops.hasDemo()) ? [...demoAccounts] : []),
    }),
    ...createModelsRoutes({
      models,
      storage,
      receiveUpload: createUploadReceiver({
        folder: storage.incomingFolder,
        maxBytes: deps.maxModelBytes,
        createId,
      }),
    }),
    ...createEnvelopesRoutes({ envelopes }),
    ...createMaterialsRoutes({ materials }),
    ...createPlansRoutes({ plans, storage }),
    ...createJobsRoutes({ jobs: repos.jobs, monitor, isStillLive: sessions.isStillLive }),
  ];
  return {
    repos,
    transact,
    sessions,
    envelopes,
    materials,
    models,
    plans,
    settler,
    monitor,
    routes,
  };
}

/** The folder of a record that was deleted while its job ran. */
function folderOf(job: FinalJob): string {
  if (job.kind === 'plan.make') return jobSchemas[job.kind].input.parse(job.input).outputPrefix;
  const { sourceKey } = jobSchemas[job.kind].input.parse(job.input);
  // The source lies in its revision's folder, that in its model's, which is gone as well.
  return dirname(dirname(sourceKey));
}
