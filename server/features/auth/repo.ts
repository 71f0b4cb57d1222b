import { and, eq, gt, isNull } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { oneTimeLinks, userRoles, users } from '@/db/schema/people';
import type { Role } from '@/lib/contracts/common';

export type UserRow = typeof users.$inferSelect;
type LinkRow = typeof oneTimeLinks.$inferSelect;

export function findUser(db: Queryable, userId: string): UserRow | undefined {
  return db.select().from(users).where(eq(users.id, userId)).get();
}

export function findUserByEmail(db: Queryable, email: string): UserRow | undefined {
  return db.select().from(users).where(eq(users.email, email)).get();
}

export function listDemoUsers(db: Queryable): UserRow[] {
  return db.select().from(users).where(eq(users.isDemo, true)).orderBy(users.id).all();
}

export function insertUser(tx: Queryable, user: typeof users.$inferInsert, roles: readonly Role[]): void {
  tx.insert(users).values(user).run();
  insertRoles(tx, user.id, roles, user.createdAtMs);
}

export function insertRoles(tx: Queryable, userId: string, roles: readonly Role[], nowMs: number): void {
  for (const role of roles) tx.insert(userRoles).values({ userId, role, grantedAtMs: nowMs }).run();
}

export function setName(tx: Queryable, userId: string, name: string): void {
  tx.update(users).set({ name }).where(eq(users.id, userId)).run();
}

export function setPasswordHash(tx: Queryable, userId: string, passwordHash: string): void {
  tx.update(users).set({ passwordHash }).where(eq(users.id, userId)).run();
}

/** A link that can still be used: not used, not taken back, not too old. */
export function findWaitingLink(db: Queryable, tokenHash: string, nowMs: number): LinkRow | undefined {
  const waits = and(
    isNull(oneTimeLinks.usedAtMs),
    isNull(oneTimeLinks.revokedAtMs),
    gt(oneTimeLinks.expiresAtMs, nowMs),
  );
  return db
    .select()
    .from(oneTimeLinks)
    .where(and(eq(oneTimeLinks.tokenHash, tokenHash), waits))
    .get();
}

export function markLinkUsed(tx: Queryable, linkId: string, nowMs: number): void {
  tx.update(oneTimeLinks).set({ usedAtMs: nowMs }).where(eq(oneTimeLinks.id, linkId)).run();
}
