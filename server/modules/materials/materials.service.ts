import type { MaterialProfile } from '../../../shared/jobs/material-profile.js';
import type { CreateId } from '../../platform/ids/create-id.js';
import { createMaterialChanged, createMaterialNotFound } from './materials.errors.js';
import type { Material, MaterialsRepository } from './materials.repository.js';

export type MaterialsService = ReturnType<typeof createMaterialsService>;

interface Key {
  readonly id: string;
  readonly workshopId: string;
}

export function createMaterialsService(deps: {
  materials: MaterialsRepository;
  clock: () => Date;
  createId: CreateId;
}) {
  const { materials, clock, createId } = deps;

  async function get(key: Key): Promise<Material> {
    const material = await materials.find(key);
    if (!material) throw createMaterialNotFound();
    return material;
  }

  return {
    list: (workshopId: string) => materials.list(workshopId),
    get,

    async create(workshopId: string, profile: MaterialProfile): Promise<Material> {
      const key = { id: createId(), workshopId };
      await materials.add(key, profile, clock());
      return get(key);
    },

    /**
     * Plans that were made keep the profile as it was.
     * @throws material.notFound, material.nameTaken, material.changed
     */
    async replace(
      key: Key,
      { profile, version }: { profile: MaterialProfile; version?: number | undefined },
    ): Promise<Material> {
      await get(key);
      if (!(await materials.replace(key, profile, version, clock()))) throw createMaterialChanged();
      return get(key);
    },

    async remove(key: Key): Promise<void> {
      if (!(await materials.remove(key))) throw createMaterialNotFound();
    },
  };
}
