import { createAccountsRepository } from './modules/accounts/accounts.repository.js';
import { createEnvelopesRepository } from './modules/envelopes/envelopes.repository.js';
import { createJobsRepository } from './modules/jobs/jobs.repository.js';
import { createMaterialsRepository } from './modules/materials/materials.repository.js';
import { createModelsRepository } from './modules/models/models.repository.js';
import { createPlansRepository } from './modules/plans/plans.repository.js';
import { createSessionRepository } from './modules/session/session.repository.js';
import { createWorkshopsRepository } from './modules/workshops/workshops.repository.js';
import type { Db } from './platform/db/client.js';
import { inTransaction, type Transact } from './platform/db/transaction.js';

export type Repositories = ReturnType<typeof createRepositories>;

/** All repositories on one database or inside one transaction. */
export function createRepositories(db: Db) {
  return {
    accounts: createAccountsRepository({ db }),
    workshops: createWorkshopsRepository({ db }),
    sessions: createSessionRepository({ db }),
    envelopes: createEnvelopesRepository({ db }),
    materials: createMaterialsRepository({ db }),
    models: createModelsRepository({ db }),
    plans: createPlansRepository({ db }),
    jobs: createJobsRepository({ db }),
  };
}

export function createTransact(db: Db): Transact<Repositories> {
  return (work) => inTransaction(db, (tx) => work(createRepositories(tx)));
}
