import { and, asc, eq, sql } from 'drizzle-orm';
import type { MaterialProfile } from '../../../shared/jobs/material-profile.js';
import type { Db } from '../../platform/db/client.js';
import { isDuplicate } from '../../platform/db/driver-errors.js';
import { createMaterialNameTaken } from './materials.errors.js';
import { materials } from './materials.table.js';

export type MaterialsRepository = ReturnType<typeof createMaterialsRepository>;

export interface Material {
  readonly id: string;
  readonly profile: MaterialProfile;
  readonly version: number;
  readonly updatedAt: Date;
}

interface Key {
  readonly id: string;
  readonly workshopId: string;
}

const columns = {
  id: materials.id,
  profile: materials.profile,
  version: materials.version,
  updatedAt: materials.updatedAt,
};
const isKey = ({ id, workshopId }: Key) =>
  and(eq(materials.id, id), eq(materials.workshopId, workshopId));

export function createMaterialsRepository({ db }: { db: Db }) {
  return {
    list: (workshopId: string): Promise<Material[]> =>
      db
        .select(columns)
        .from(materials)
        .where(eq(materials.workshopId, workshopId))
        .orderBy(asc(materials.name)),

    async find(key: Key): Promise<Material | null> {
      const rows = await db.select(columns).from(materials).where(isKey(key)).limit(1);
      return rows[0] ?? null;
    },

    /** @throws material.nameTaken */
    async add(key: Key, profile: MaterialProfile, now: Date): Promise<void> {
      await named(profile, () =>
        db.insert(materials).values({
          ...key,
          name: profile.name,
          profile,
          version: 1,
          createdAt: now,
          updatedAt: now,
        }),
      );
    },

    /**
     * @param version the one that may be replaced; undefined: whichever
     * @returns whether one was replaced. @throws material.nameTaken
     */
    async replace(
      key: Key,
      profile: MaterialProfile,
      version: number | undefined,
      now: Date,
    ): Promise<boolean> {
      const [changed] = await named(profile, () =>
        db
          .update(materials)
          .set({
            name: profile.name,
            profile,
            version: sql`${materials.version} + 1`,
            updatedAt: now,
          })
          .where(
            and(isKey(key), version === undefined ? undefined : eq(materials.version, version)),
          ),
      );
      return changed.affectedRows > 0;
    },

    /** @returns whether there was one */
    async remove(key: Key): Promise<boolean> {
      const [gone] = await db.delete(materials).where(isKey(key));
      return gone.affectedRows > 0;
    },
  };
}

async function named<T>({ name }: MaterialProfile, write: () => Promise<T>): Promise<T> {
  try {
    return await write();
  } catch (error) {
    // ER_DUP_ENTRY: the only unique value besides the identifier is the name in the workshop.
    if (isDuplicate(error)) throw createMaterialNameTaken(name);
    throw error;
  }
}
