import { DrizzleSQLiteAdapter } from '@lucia-auth/adapter-drizzle';
import type { Adapter, DatabaseSession, DatabaseUser } from 'lucia';
import type { Store } from '@/db/openDatabase';
import { sessions, users } from '@/db/schema/people';
import type { Clock } from '../deps.ts';
import { hashSecret } from './secrets.ts';
import { deleteByHash, deleteEndedSessions, deleteSessions, IDLE_MS, insertSession } from './sessionRepo.ts';

export const LONGEST_MS = 30 * 24 * 3_600_000;

/**
 * Between the session library and its tables. It keeps three things that the library does not: the table holds the SHA-256 of
 * the id only; a session ends 12 h after its last use and 30 days after its start; and the time is the server's clock, so
 * that tests can move it. The library compares with the real time: it is told an end as far from there as ours is from now.
 */
export class HashedIdAdapter implements Adapter {
  private readonly inner: DrizzleSQLiteAdapter;
  private readonly store: Store;
  private readonly clock: Clock;

  constructor(store: Store, clock: Clock) {
    this.store = store;
    this.clock = clock;
    this.inner = new DrizzleSQLiteAdapter(store.db, sessions, users);
  }

  async getSessionAndUser(id: string): Promise<[DatabaseSession | null, DatabaseUser | null]> {
    const [session, user] = await this.inner.getSessionAndUser(hashSecret(id));
    if (!session) return [null, null];
    const nowMs = this.clock.nowMs();
    const endsAtMs = Math.min(session.expiresAt.getTime(), session.attributes.lastSeenAtMs + IDLE_MS);
    // A last use in the future is a clock that jumped back: the session lives on, never longer than from now.
    const leftMs = Math.min(endsAtMs - nowMs, LONGEST_MS);
    return [{ ...session, id, expiresAt: new Date(Date.now() + leftMs) }, user];
  }

  async getUserSessions(userId: string): Promise<DatabaseSession[]> {
    return this.inner.getUserSessions(userId);
  }

  setSession(session: DatabaseSession): Promise<void> {
    const expiresAtSec = Math.floor((this.clock.nowMs() + LONGEST_MS) / 1000);
    const row = { id: hashSecret(session.id), userId: session.userId, expiresAt: expiresAtSec };
    this.store.write((tx) => insertSession(tx, { ...session.attributes, ...row }));
    return Promise.resolve();
  }

  /** The library would push the end back as it likes: ours is the last use, see touchSession. */
  updateSessionExpiration(): Promise<void> {
    return Promise.resolve();
  }

  deleteSession(id: string): Promise<void> {
    this.store.write((tx) => deleteByHash(tx, hashSecret(id)));
    return Promise.resolve();
  }

  deleteUserSessions(userId: string): Promise<void> {
    this.store.write((tx) => deleteSessions(tx, userId, null));
    return Promise.resolve();
  }

  deleteExpiredSessions(): Promise<void> {
    this.store.write((tx) => deleteEndedSessions(tx, this.clock.nowMs()));
    return Promise.resolve();
  }
}
