import { and, desc, eq, gt, isNotNull, isNull, or } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { oneTimeLinks, userRoles, users } from '@/db/schema/people';
import type { Role } from '@/lib/contracts/common';

export type UserRow = typeof users.$inferSelect;
type LinkRow = typeof oneTimeLinks.$inferSelect;

export function listUsers(db: Queryable): UserRow[] {
  return db.select().from(users).orderBy(users.name, users.id).all();
}

export function findUser(db: Queryable, userId: string): UserRow | undefined {
  return db.select().from(users).where(eq(users.id, userId)).get();
}

export function isEmailTaken(db: Queryable, email: string): boolean {
  return db.select({ id: users.id }).from(users).where(eq(users.email, email)).get() !== undefined;
}

export function rolesByUser(db: Queryable): Map<string, Role[]> {
  const byUser = new Map<string, Role[]>();
  for (const row of db.select().from(userRoles).all())
    byUser.set(row.userId, [...(byUser.get(row.userId) ?? []), row.role]);
  return byUser;
}

export function insertUser(tx: Queryable, user: typeof users.$inferInsert): void {
  tx.insert(users).values(user).run();
}

export function replaceRoles(tx: Queryable, userId: string, roles: readonly Role[], nowMs: number): void {
  tx.delete(userRoles).where(eq(userRoles.userId, userId)).run();
  for (const role of roles) tx.insert(userRoles).values({ userId, role, grantedAtMs: nowMs }).run();
}

/** Admins who can sign in: an invitation that nobody took up keeps no team running. */
export function listAbleAdminIds(db: Queryable): string[] {
  const able = or(isNotNull(users.passwordHash), eq(users.isDemo, true));
  return db
    .select({ id: users.id })
    .from(users)
    .innerJoin(userRoles, eq(userRoles.userId, users.id))
    .where(and(eq(userRoles.role, 'admin'), able))
    .all()
    .map((row) => row.id);
}

function waits(nowMs: number) {
  return and(isNull(oneTimeLinks.usedAtMs), isNull(oneTimeLinks.revokedAtMs), gt(oneTimeLinks.expiresAtMs, nowMs));
}

export function waitingLinks(db: Queryable, nowMs: number): Map<string, LinkRow> {
  const rows = db.select().from(oneTimeLinks).where(waits(nowMs)).orderBy(desc(oneTimeLinks.createdAtMs)).all();
  return new Map(rows.reverse().map((row) => [row.userId, row]));
}

export function insertLink(tx: Queryable, link: typeof oneTimeLinks.$inferInsert): void {
  tx.insert(oneTimeLinks).values(link).run();
}

export function revokeLinks(tx: Queryable, userId: string, nowMs: number): number {
  const mine = and(eq(oneTimeLinks.userId, userId), waits(nowMs));
  return tx.update(oneTimeLinks).set({ revokedAtMs: nowMs }).where(mine).run().changes;
}
