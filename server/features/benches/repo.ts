import { and, asc, count, desc, eq, sql } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { benchProfiles, benchProfileVersions } from '@/db/schema/benches';
import { packs } from '@/db/schema/packs';
import { users } from '@/db/schema/people';

const selectVersions = (db: Queryable) =>
  db
    .select({
      id: benchProfileVersions.id,
      benchId: benchProfileVersions.profileId,
      version: benchProfileVersions.number,
      name: benchProfileVersions.name,
      profileJson: benchProfileVersions.profileJson,
      contentDigest: benchProfileVersions.contentDigest,
      fileDigest: benchProfileVersions.fileDigest,
      savedBy: benchProfileVersions.savedBy,
      savedByName: users.name,
      savedAtMs: benchProfileVersions.savedAtMs,
      isNewest: sql<number>`${benchProfileVersions.id} = ${benchProfiles.headVersionId}`.mapWith(Boolean),
      packCount: sql<number>`(select ${count()} from ${packs} where ${packs.profileVersionId} = ${benchProfileVersions.id})`,
    })
    .from(benchProfileVersions)
    .innerJoin(benchProfiles, eq(benchProfiles.id, benchProfileVersions.profileId))
    .innerJoin(users, eq(users.id, benchProfileVersions.savedBy));

export type BenchVersionRow = ReturnType<typeof listVersions>[number];

/** Newest first. */
export function listVersions(db: Queryable, benchId: string) {
  return selectVersions(db)
    .where(eq(benchProfileVersions.profileId, benchId))
    .orderBy(desc(benchProfileVersions.number))
    .all();
}

export function listNewestVersions(db: Queryable): BenchVersionRow[] {
  return selectVersions(db)
    .where(eq(benchProfileVersions.id, benchProfiles.headVersionId))
    .orderBy(asc(benchProfileVersions.name), asc(benchProfiles.id))
    .all();
}

/** One version, or the newest. */
export function findVersion(db: Queryable, benchId: string, version?: number): BenchVersionRow | undefined {
  const which =
    version === undefined
      ? eq(benchProfileVersions.id, benchProfiles.headVersionId)
      : eq(benchProfileVersions.number, version);
  return selectVersions(db)
    .where(and(eq(benchProfileVersions.profileId, benchId), which))
    .get();
}

export function insertBench(tx: Queryable, row: typeof benchProfiles.$inferInsert): void {
  tx.insert(benchProfiles).values(row).run();
}

export function insertVersion(tx: Queryable, row: typeof benchProfileVersions.$inferInsert): void {
  tx.insert(benchProfileVersions).values(row).run();
  tx.update(benchProfiles).set({ headVersionId: row.id }).where(eq(benchProfiles.id, row.profileId)).run();
}
