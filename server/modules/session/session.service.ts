import type { CreateId } from '../../platform/ids/create-id.js';
import type { Session } from '../../platform/http/session-context.js';
import { type AccountsRepository, normalEmail } from '../accounts/accounts.repository.js';
import { isRightPassword } from '../accounts/passwords.js';
import type { WorkshopsRepository } from '../workshops/workshops.repository.js';
import { createWrongCredentials } from './session.errors.js';
import type { SessionRepository } from './session.repository.js';
import {
  hashOfToken,
  makeAccessToken,
  makeRefreshToken,
  readAccessToken,
} from './session-tokens.js';

export const SESSION_LIFETIME_MS = 30 * 24 * 60 * 60 * 1000;
/** Two tabs may send the same token at once; a second use after this long is a theft. */
export const PARALLEL_TABS_MS = 10_000;

export type SessionService = ReturnType<typeof createSessionService>;

/** What the cookies get. Without a refresh token the browser keeps the one it has. */
export interface IssuedTokens {
  readonly session: Session;
  readonly accessToken: string;
  readonly refreshToken: string | null;
}

export function createSessionService(deps: {
  accounts: Pick<AccountsRepository, 'findByEmail' | 'findById'>;
  workshops: Pick<WorkshopsRepository, 'firstMembershipOf' | 'roleOf' | 'findById'>;
  sessions: SessionRepository;
  secret: string;
  clock: () => Date;
  createId: CreateId;
}) {
  const { accounts, workshops, sessions, secret, clock, createId } = deps;

  /** Adds the role as it is now: a role that was changed or taken away counts at once. */
  async function withRole(found: { id: string; userId: string; workshopId: string } | null) {
    if (!found) return null;
    const role = await workshops.roleOf(found);
    const { id, userId, workshopId } = found;
    return role ? { id, userId, workshopId, role } : null;
  }

  function issue(session: Session, refreshToken: string | null): IssuedTokens {
    const accessToken = makeAccessToken({ sessionId: session.id, secret, now: clock() });
    return { session, accessToken, refreshToken };
  }

  return {
    /** @throws session.wrongCredentials, whatever of the two is wrong */
    async signIn(credentials: { email: string; password: string }): Promise<IssuedTokens> {
      const user = await accounts.findByEmail(normalEmail(credentials.email));
      const isRight = await isRightPassword(credentials.password, user?.passwordHash ?? null);
      const member = user && isRight ? await workshops.firstMembershipOf(user.id) : null;
      if (!user || !member) throw createWrongCredentials();

      const now = clock();
      const refreshToken = makeRefreshToken();
      const session = { id: createId(), userId: user.id, ...member };
      await sessions.forgetExpired(now);
      await sessions.open({
        id: session.id,
        userId: session.userId,
        workshopId: session.workshopId,
        tokenHash: hashOfToken(refreshToken),
        createdAt: now,
        expiresAt: new Date(now.getTime() + SESSION_LIFETIME_MS),
      });
      return issue(session, refreshToken);
    },

    /** The session an access token opens, or null. */
    async authenticate(accessToken: string): Promise<Session | null> {
      const now = clock();
      const id = readAccessToken({ token: accessToken, secret, now });
      return id ? withRole(await sessions.findLive(id, now)) : null;
    },

    /** Whether a session that was authenticated a while ago still holds. */
    async isStillLive(session: Session): Promise<boolean> {
      return (await withRole(await sessions.findLive(session.id, clock()))) !== null;
    },

    /** The live session to which a refresh token belongs, spent or not. */
    async findByRefreshToken(refreshToken: string): Promise<Session | null> {
      return withRole(await sessions.findByToken(hashOfToken(refreshToken), clock()));
    },

    /**
     * Exchanges a refresh token for the next. Null when it opens nothing (any more): a token that
     * comes back after it was spent was stolen, by whichever side, and ends the whole session.
     */
    async refresh(refreshToken: string): Promise<IssuedTokens | null> {
      const now = clock();
      const oldHash = hashOfToken(refreshToken);
      const found = await sessions.findByToken(oldHash, now);
      const session = await withRole(found);
      if (!found || !session) return null;
      if (found.spentAt && now.getTime() - found.spentAt.getTime() > PARALLEL_TABS_MS) {
        await sessions.revoke(session.id, now);
        return null;
      }
      // A tab that came second gets access alone: the next token went out with the first answer.
      if (found.spentAt) return issue(session, null);
      const next = makeRefreshToken();
      const newHash = hashOfToken(next);
      const rotated = await sessions.rotate({ sessionId: session.id, oldHash, newHash, now });
      return issue(session, rotated ? next : null);
    },

    async signOut(session: Session): Promise<void> {
      await sessions.revoke(session.id, clock());
    },

    /** Names for the screen. Null when the account or workshop has just been removed. */
    async describe(session: Session) {
      const user = await accounts.findById(session.userId);
      const workshop = await workshops.findById(session.workshopId);
      return user && workshop ? { user, workshop, role: session.role } : null;
    },
  };
}
