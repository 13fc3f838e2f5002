import { and, eq, gt, isNull, lt } from 'drizzle-orm';
import type { Db } from '../../platform/db/client.js';
import { inTransaction } from '../../platform/db/transaction.js';
import { refreshTokens } from './refresh-tokens.table.js';
import { sessions } from './sessions.table.js';

export type SessionRepository = ReturnType<typeof createSessionRepository>;

const identity = {
  id: sessions.id,
  userId: sessions.userId,
  workshopId: sessions.workshopId,
};

export function createSessionRepository({ db }: { db: Db }) {
  return {
    async open(session: {
      id: string;
      userId: string;
      workshopId: string;
      tokenHash: string;
      createdAt: Date;
      expiresAt: Date;
    }): Promise<void> {
      const { tokenHash, ...row } = session;
      await inTransaction(db, async (tx) => {
        await tx.insert(sessions).values(row);
        await tx
          .insert(refreshTokens)
          .values({ tokenHash, sessionId: row.id, createdAt: row.createdAt });
      });
    },

    /** A session that is neither over nor revoked. */
    async findLive(id: string, now: Date) {
      const rows = await db
        .select(identity)
        .from(sessions)
        .where(and(eq(sessions.id, id), isNull(sessions.revokedAt), gt(sessions.expiresAt, now)))
        .limit(1);
      return rows[0] ?? null;
    },

    /** The live session to which a refresh token belongs, and when the token was spent. */
    async findByToken(tokenHash: string, now: Date) {
      const rows = await db
        .select({ ...identity, spentAt: refreshTokens.spentAt })
        .from(refreshTokens)
        .innerJoin(sessions, eq(sessions.id, refreshTokens.sessionId))
        .where(
          and(
            eq(refreshTokens.tokenHash, tokenHash),
            isNull(sessions.revokedAt),
            gt(sessions.expiresAt, now),
          ),
        )
        .limit(1);
      return rows[0] ?? null;
    },

    /** Exchanges a token for the next. False when someone else has just spent it. */
    rotate(exchange: { sessionId: string; oldHash: string; newHash: string; now: Date }) {
      return inTransaction(db, async (tx) => {
        const [spent] = await tx
          .update(refreshTokens)
          .set({ spentAt: exchange.now })
          .where(and(eq(refreshTokens.tokenHash, exchange.oldHash), isNull(refreshTokens.spentAt)));
        if (spent.affectedRows === 0) return false;
        await tx.insert(refreshTokens).values({
          tokenHash: exchange.newHash,
          sessionId: exchange.sessionId,
          createdAt: exchange.now,
        });
        return true;
      });
    },

    async revoke(id: string, now: Date): Promise<void> {
      await db.update(sessions).set({ revokedAt: now }).where(eq(sessions.id, id));
    },

    /** Forgets sessions that are over, with their tokens. */
    async forgetExpired(now: Date): Promise<void> {
      await db.delete(sessions).where(lt(sessions.expiresAt, now));
    },
  };
}
