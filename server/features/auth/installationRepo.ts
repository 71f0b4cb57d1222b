import { count, eq } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { installation, users } from '@/db/schema/people';

const ONLY = 1;

export type Installation = typeof installation.$inferSelect;

export function findInstallation(db: Queryable): Installation | undefined {
  return db.select().from(installation).where(eq(installation.id, ONLY)).get();
}

export function insertInstallation(tx: Queryable, kind: Installation['kind'], nowMs: number): void {
  tx.insert(installation).values({ id: ONLY, kind, createdAtMs: nowMs }).run();
}

export function setFirstRunCodeHash(tx: Queryable, hash: string | null): void {
  tx.update(installation).set({ firstRunCodeHash: hash }).where(eq(installation.id, ONLY)).run();
}

export function markDemoReady(tx: Queryable, nowMs: number): void {
  tx.update(installation).set({ demoReadyAtMs: nowMs }).where(eq(installation.id, ONLY)).run();
}

export function hasPeople(db: Queryable): boolean {
  return (db.select({ n: count() }).from(users).get()?.n ?? 0) > 0;
}
