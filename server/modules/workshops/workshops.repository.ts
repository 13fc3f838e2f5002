import { and, asc, eq } from 'drizzle-orm';
import type { UsualUnit } from '../../../shared/api/model-scale.js';
import type { Role } from '../../../shared/api/roles.js';
import type { Db } from '../../platform/db/client.js';
import { memberships } from './memberships.table.js';
import { workshops } from './workshops.table.js';

export type WorkshopsRepository = ReturnType<typeof createWorkshopsRepository>;

export function createWorkshopsRepository({ db }: { db: Db }) {
  return {
    async findById(id: string) {
      const rows = await db
        .select({ id: workshops.id, name: workshops.name, isDemo: workshops.isDemo })
        .from(workshops)
        .where(eq(workshops.id, id))
        .limit(1);
      return rows[0] ?? null;
    },

    /** The unit that was chosen last; null when none was yet. */
    async usualUnit(id: string): Promise<UsualUnit | null> {
      const rows = await db
        .select({ usualUnit: workshops.usualUnit })
        .from(workshops)
        .where(eq(workshops.id, id))
        .limit(1);
      return rows[0]?.usualUnit ?? null;
    },

    async rememberUnit(id: string, usualUnit: UsualUnit): Promise<void> {
      await db.update(workshops).set({ usualUnit }).where(eq(workshops.id, id));
    },

    async hasAny(): Promise<boolean> {
      return (await db.select({ id: workshops.id }).from(workshops).limit(1)).length > 0;
    },

    async hasDemo(): Promise<boolean> {
      const rows = await db
        .select({ id: workshops.id })
        .from(workshops)
        .where(eq(workshops.isDemo, true))
        .limit(1);
      return rows.length > 0;
    },

    /** The workshop a person signs in to: the one they joined first. */
    async firstMembershipOf(userId: string) {
      const rows = await db
        .select({ workshopId: memberships.workshopId, role: memberships.role })
        .from(memberships)
        .where(eq(memberships.userId, userId))
        .orderBy(asc(memberships.createdAt), asc(memberships.workshopId))
        .limit(1);
      return rows[0] ?? null;
    },

    /** Null when the person does not belong to the workshop (any more). */
    async roleOf({ userId, workshopId }: { userId: string; workshopId: string }) {
      const rows = await db
        .select({ role: memberships.role })
        .from(memberships)
        .where(and(eq(memberships.userId, userId), eq(memberships.workshopId, workshopId)))
        .limit(1);
      return rows[0]?.role ?? null;
    },

    async add(workshop: { id: string; name: string; isDemo: boolean; createdAt: Date }) {
      await db.insert(workshops).values(workshop);
    },

    async addMember(member: { userId: string; workshopId: string; role: Role; createdAt: Date }) {
      await db.insert(memberships).values(member);
    },
  };
}
