import { and, count, desc, eq, gt, lte, ne, or } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { sessions, userRoles, users } from '@/db/schema/people';

export const IDLE_MS = 12 * 3_600_000;

/** In force: used within 12 h, begun within 30 days. */
function inForce(nowMs: number) {
  return and(gt(sessions.lastSeenAtMs, nowMs - IDLE_MS), gt(sessions.expiresAt, Math.floor(nowMs / 1000)));
}

export function deleteEndedSessions(tx: Queryable, nowMs: number): void {
  const ended = or(lte(sessions.lastSeenAtMs, nowMs - IDLE_MS), lte(sessions.expiresAt, Math.floor(nowMs / 1000)));
  tx.delete(sessions).where(ended).run();
}

export function listSessionRows(db: Queryable, userId: string, nowMs: number) {
  const mine = and(eq(sessions.userId, userId), inForce(nowMs));
  return db.select().from(sessions).where(mine).orderBy(desc(sessions.lastSeenAtMs)).all();
}

export function countSessionRows(db: Queryable, nowMs: number): Map<string, number> {
  const counted = db.select({ userId: sessions.userId, n: count() }).from(sessions).where(inForce(nowMs));
  const rows = counted.groupBy(sessions.userId).all();
  return new Map(rows.map((row) => [row.userId, row.n]));
}

export function insertSession(tx: Queryable, session: typeof sessions.$inferInsert): void {
  tx.insert(sessions).values(session).run();
}

export function deleteByHash(tx: Queryable, sessionHash: string): void {
  tx.delete(sessions).where(eq(sessions.id, sessionHash)).run();
}

export function touchSession(tx: Queryable, sessionHash: string, userId: string, nowMs: number): void {
  tx.update(sessions).set({ lastSeenAtMs: nowMs }).where(eq(sessions.id, sessionHash)).run();
  tx.update(users).set({ lastSeenAtMs: nowMs }).where(eq(users.id, userId)).run();
}

/** Ends a person's sessions, all or all but one; answers how many went. */
export function deleteSessions(tx: Queryable, userId: string, exceptPublicId: string | null): number {
  const mine = eq(sessions.userId, userId);
  return tx
    .delete(sessions)
    .where(exceptPublicId === null ? mine : and(mine, ne(sessions.publicId, exceptPublicId)))
    .run().changes;
}

export function deleteSession(tx: Queryable, userId: string, publicId: string): boolean {
  return (
    tx
      .delete(sessions)
      .where(and(eq(sessions.userId, userId), eq(sessions.publicId, publicId)))
      .run().changes > 0
  );
}

export function listRoles(db: Queryable, userId: string) {
  const rows = db.select({ role: userRoles.role }).from(userRoles).where(eq(userRoles.userId, userId)).all();
  return rows.map((row) => row.role);
}
