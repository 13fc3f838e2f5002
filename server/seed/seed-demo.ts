import { mkdir, rm, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { materialPresets } from '../../shared/jobs/material-profile.js';
import type { EnvelopeData } from '../modules/envelopes/envelopes.model.js';
import { createModelsService } from '../modules/models/models.service.js';
import { hashPassword } from '../modules/accounts/passwords.js';
import type { Transact } from '../platform/db/transaction.js';
import type { CreateId } from '../platform/ids/create-id.js';
import type { FileStorage } from '../platform/storage/disk-storage.js';
import type { Repositories } from '../repositories.js';
import { demoAccounts } from './demo-accounts.js';
import { demoModels } from './demo-models.js';
import { toBinaryStl } from './solids/binary-stl.js';

const WORKSHOP_NAME = 'Tidewater Players, props workshop (demo)';

const nozzle = { nozzleMm: 0.4, layerHeightMm: 0.2 };
const demoEnvelopes: readonly EnvelopeData[] = [
  {
    name: 'Medium bed 220 × 220 × 250',
    shape: 'rectangular',
    widthMm: 220,
    depthMm: 220,
    heightMm: 250,
    marginMm: 0,
    ...nozzle,
  },
  {
    name: 'Large bed 300 × 300 × 400',
    shape: 'rectangular',
    widthMm: 300,
    depthMm: 300,
    heightMm: 400,
    marginMm: 5,
    nozzleMm: 0.6,
    layerHeightMm: 0.3,
  },
  {
    name: 'Small cube 180',
    shape: 'rectangular',
    widthMm: 180,
    depthMm: 180,
    heightMm: 180,
    marginMm: 2,
    ...nozzle,
  },
  {
    name: 'Round bed ⌀ 300 × 400',
    shape: 'round',
    diameterMm: 300,
    heightMm: 400,
    marginMm: 5,
    ...nozzle,
  },
];

interface SeedDependencies {
  readonly transact: Transact<Repositories>;
  readonly storage: FileStorage;
  readonly clock: () => Date;
  readonly createId: CreateId;
}

/**
 * Fills an empty database with the demo workshop: people, envelopes, and models made by code that
 * go the way of every upload. All or nothing. Two servers must not seed at the same time: the
 * caller holds a lock.
 * @returns whether there was anything to do
 */
export async function seedDemo(deps: SeedDependencies): Promise<boolean> {
  const { transact, storage, clock, createId } = deps;
  const workshopId = createId();
  const making = join(storage.incomingFolder, `demo-${createId()}`);
  try {
    return await transact(async (repos) => {
      if (await repos.workshops.hasAny()) return false;
      const createdAt = clock();
      await repos.workshops.add({ id: workshopId, name: WORKSHOP_NAME, isDemo: true, createdAt });
      const designerId = await addPeople(repos, workshopId, deps);
      for (const envelope of demoEnvelopes)
        await repos.envelopes.add({ id: createId(), workshopId }, envelope, createdAt);
      for (const material of materialPresets)
        await repos.materials.add({ id: createId(), workshopId }, material, createdAt);
      await mkdir(making, { recursive: true });
      await addModels(repos, { workshopId, userId: designerId, making }, deps);
      return true;
    });
  } catch (error) {
    // The rows are rolled back; files must not stay without them.
    await storage.remove(`workshops/${workshopId}`);
    throw error;
  } finally {
    await rm(making, { recursive: true, force: true });
  }
}

/** @returns the designer, who brings the models */
async function addPeople(
  repos: Repositories,
  workshopId: string,
  { clock, createId }: SeedDependencies,
): Promise<string> {
  let designerId = '';
  for (const { email, password, role, name } of demoAccounts) {
    const userId = createId();
    if (role === 'designer') designerId = userId;
    const passwordHash = await hashPassword(password);
    await repos.accounts.add({
      id: userId,
      email,
      name,
      passwordHash,
      isDemo: true,
      createdAt: clock(),
    });
    await repos.workshops.addMember({ userId, workshopId, role, createdAt: clock() });
  }
  return designerId;
}

async function addModels(
  repos: Repositories,
  owner: { workshopId: string; userId: string; making: string },
  deps: SeedDependencies,
): Promise<void> {
  const models = createModelsService({
    ...deps,
    models: repos.models,
    jobs: repos.jobs,
    // We are inside the seed's transaction already.
    transact: (work) => work(repos),
    namesOf: repos.accounts.namesOf,
    countPlans: repos.plans.countByModel,
    countPlansOf: repos.plans.countByRevision,
  });
  for (const { name, fileName, make } of demoModels) {
    const bytes = toBinaryStl(make(), `Seamwright demo: ${name}`);
    const path = join(owner.making, fileName);
    await writeFile(path, bytes);
    await models.add({ ...owner, name, file: { path, fileName, bytes: bytes.length } });
  }
}
