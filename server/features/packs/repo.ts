import { and, asc, count, desc, eq, gt, inArray, isNull, or, sql } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import type { Queryable } from '@/db/openDatabase';
import { benchProfiles, benchProfileVersions } from '@/db/schema/benches';
import { deviceCards, packJobs, packs } from '@/db/schema/packs';
import { users } from '@/db/schema/people';
import { editions, revisions, withdrawals } from '@/db/schema/waveforms';

const withdrawers = alias(users, 'withdrawers');

/** A pack with all that its public shape names; the manifest stays out, only what a list shows is read from it. */
const selectPacks = (db: Queryable) =>
  db
    .select({
      id: packs.id,
      packKey: packs.packKey,
      revisionId: packs.revisionId,
      waveformId: revisions.waveformId,
      revisionNumber: revisions.number,
      revisionTitle: revisions.title,
      revisionAuthorId: revisions.authorId,
      contentDigest: revisions.contentDigest,
      editionId: packs.editionId,
      editionNumber: editions.number,
      editionTitle: editions.title,
      releasedAtMs: editions.releasedAtMs,
      withdrawnReason: withdrawals.reason,
      withdrawnAtMs: withdrawals.withdrawnAtMs,
      withdrawnBy: withdrawals.withdrawnBy,
      withdrawnByName: withdrawers.name,
      benchId: benchProfileVersions.profileId,
      benchVersion: benchProfileVersions.number,
      benchName: benchProfileVersions.name,
      profileVersionId: packs.profileVersionId,
      fileName: packs.fileName,
      storedPath: packs.storedPath,
      fileBytes: packs.fileBytes,
      fileSha256: packs.fileSha256,
      vectorSha256: packs.vectorSha256,
      vectorName: sql<string>`json_extract(${packs.manifestJson}, '$.files[0].name')`,
      samples: sql<number>`json_extract(${packs.manifestJson}, '$.samples.fileSamples')`,
      sampleClockHz: sql<number>`json_extract(${packs.manifestJson}, '$.clock.sampleClockHz')`,
      evmDb: sql<number | null>`json_extract(${packs.manifestJson}, '$.proof.evmDb')`,
      madeBy: packs.madeBy,
      madeByName: users.name,
      madeAtMs: packs.madeAtMs,
    })
    .from(packs)
    .innerJoin(revisions, eq(revisions.id, packs.revisionId))
    .innerJoin(benchProfileVersions, eq(benchProfileVersions.id, packs.profileVersionId))
    .innerJoin(users, eq(users.id, packs.madeBy))
    .leftJoin(editions, eq(editions.id, packs.editionId))
    .leftJoin(withdrawals, eq(withdrawals.editionId, editions.id))
    .leftJoin(withdrawers, eq(withdrawers.id, withdrawals.withdrawnBy));

export type PackRow = NonNullable<ReturnType<typeof findPack>>;

export function findPack(db: Queryable, packId: string) {
  return selectPacks(db).where(eq(packs.id, packId)).get();
}

/** The row of one revision (as edition or as draft) and profile version, if it was made. */
export function findPackOf(
  db: Queryable,
  of: { revisionId: string; editionId: string | null; profileVersionId: string; packKey: string },
) {
  return selectPacks(db)
    .where(
      and(
        eq(packs.revisionId, of.revisionId),
        of.editionId === null ? isNull(packs.editionId) : eq(packs.editionId, of.editionId),
        eq(packs.profileVersionId, of.profileVersionId),
        eq(packs.packKey, of.packKey),
      ),
    )
    .get();
}

/** Any row of these bytes: they may be shared, rights and withdrawal go by the row. */
export function findStored(db: Queryable, packKey: string) {
  return db.select().from(packs).where(eq(packs.packKey, packKey)).orderBy(asc(packs.madeAtMs)).get();
}

export function readManifestJson(db: Queryable, packId: string): string {
  return db.select({ json: packs.manifestJson }).from(packs).where(eq(packs.id, packId)).get()?.json ?? '{}';
}

export interface PackFilter {
  waveformId?: string | undefined;
  revisionId?: string | undefined;
  benchId?: string | undefined;
  /** Drafts of this person; others' are not listed. */
  draftsOf: string | null;
  title?: string | undefined;
  /** First digits of a digest, lower case hexadecimal. */
  digestStart?: string | undefined;
}

function conditionOf(filter: PackFilter) {
  const { title, digestStart } = filter;
  // instr, not LIKE: what a person typed holds no patterns.
  const byTitle =
    title === undefined
      ? undefined
      : sql`instr(lower(coalesce(${editions.title}, ${revisions.title})), ${title.toLowerCase()}) > 0`;
  const startsWith = (column: unknown, from: number) =>
    sql`substr(${column}, ${from}, ${digestStart?.length ?? 0}) = ${digestStart}`;
  const byDigest =
    digestStart === undefined
      ? undefined
      : or(
          startsWith(packs.vectorSha256, 1),
          startsWith(packs.fileSha256, 1),
          startsWith(revisions.contentDigest, 'sha256:'.length + 1),
        );
  return and(
    filter.waveformId === undefined ? undefined : eq(revisions.waveformId, filter.waveformId),
    filter.revisionId === undefined ? undefined : eq(packs.revisionId, filter.revisionId),
    filter.benchId === undefined ? undefined : eq(benchProfileVersions.profileId, filter.benchId),
    or(
      sql`${packs.editionId} is not null`,
      filter.draftsOf === null ? undefined : eq(revisions.authorId, filter.draftsOf),
    ),
    byTitle || byDigest ? or(byTitle, byDigest) : undefined,
  );
}

/** Newest release first, drafts by the time they were made. */
export function listPackRows(db: Queryable, filter: PackFilter, most: number): { rows: PackRow[]; more: number } {
  const condition = conditionOf(filter);
  const rows = selectPacks(db)
    .where(condition)
    .orderBy(desc(sql`coalesce(${editions.releasedAtMs}, ${packs.madeAtMs})`), desc(packs.madeAtMs), desc(packs.id))
    .limit(most)
    .all();
  if (rows.length < most) return { rows, more: 0 };
  const all = db
    .select({ n: count() })
    .from(packs)
    .innerJoin(revisions, eq(revisions.id, packs.revisionId))
    .innerJoin(benchProfileVersions, eq(benchProfileVersions.id, packs.profileVersionId))
    .leftJoin(editions, eq(editions.id, packs.editionId))
    .where(condition)
    .get();
  return { rows, more: Math.max(0, (all?.n ?? 0) - rows.length) };
}

export function insertPack(tx: Queryable, row: typeof packs.$inferInsert): void {
  tx.insert(packs).values(row).run();
}

/** The same bytes made again after their file was lost. */
export function updateStored(tx: Queryable, packId: string, change: Partial<typeof packs.$inferInsert>): void {
  const { storedPath, fileBytes, fileSha256 } = change;
  tx.update(packs)
    .set({ ...(storedPath && { storedPath }), ...(fileBytes && { fileBytes }), ...(fileSha256 && { fileSha256 }) })
    .where(eq(packs.id, packId))
    .run();
}

export function readProfileJson(db: Queryable, profileVersionId: string): string {
  const row = db
    .select({ profileJson: benchProfileVersions.profileJson })
    .from(benchProfileVersions)
    .where(eq(benchProfileVersions.id, profileVersionId))
    .get();
  if (!row) throw new Error(`The profile version ${profileVersionId} is missing.`);
  return row.profileJson;
}

/** One version of a bench profile, or its newest. */
export function findProfileVersion(db: Queryable, benchId: string, version: number | undefined) {
  const which =
    version === undefined
      ? eq(benchProfileVersions.id, benchProfiles.headVersionId)
      : eq(benchProfileVersions.number, version);
  return db
    .select({ id: benchProfileVersions.id, profileJson: benchProfileVersions.profileJson })
    .from(benchProfileVersions)
    .innerJoin(benchProfiles, eq(benchProfiles.id, benchProfileVersions.profileId))
    .where(and(eq(benchProfiles.id, benchId), which))
    .get();
}

const askers = alias(users, 'askers');

const selectJobs = (db: Queryable) =>
  db
    .select({
      job: packJobs,
      waveformId: revisions.waveformId,
      revisionAuthorId: revisions.authorId,
      contentDigest: revisions.contentDigest,
      withdrawnReason: withdrawals.reason,
      title: sql<string>`coalesce(${editions.title}, ${revisions.title})`,
      editionNumber: editions.number,
      benchId: benchProfileVersions.profileId,
      benchVersion: benchProfileVersions.number,
      benchName: benchProfileVersions.name,
      askedByName: askers.name,
    })
    .from(packJobs)
    .innerJoin(revisions, eq(revisions.id, packJobs.revisionId))
    .innerJoin(benchProfileVersions, eq(benchProfileVersions.id, packJobs.profileVersionId))
    .innerJoin(askers, eq(askers.id, packJobs.askedBy))
    .leftJoin(editions, eq(editions.id, packJobs.editionId))
    .leftJoin(withdrawals, eq(withdrawals.editionId, editions.id));

export type JobRow = NonNullable<ReturnType<typeof findJob>>;
type JobColumns = typeof packJobs.$inferInsert;

export function findJob(db: Queryable, jobId: string) {
  return selectJobs(db).where(eq(packJobs.id, jobId)).get();
}

/** Waiting and running ones, and those that failed after `failedSinceMs`, oldest first. */
export function listJobRows(db: Queryable, failedSinceMs: number, most: number): JobRow[] {
  return selectJobs(db)
    .where(
      or(
        inArray(packJobs.state, ['waiting', 'running']),
        and(eq(packJobs.state, 'failed'), gt(packJobs.endedAtMs, failedSinceMs)),
      ),
    )
    .orderBy(asc(packJobs.createdAtMs), asc(packJobs.id))
    .limit(most)
    .all();
}

export function insertJob(tx: Queryable, row: JobColumns): void {
  tx.insert(packJobs).values(row).run();
}

export function updateJob(tx: Queryable, jobId: string, change: Partial<JobColumns>): void {
  tx.update(packJobs).set(change).where(eq(packJobs.id, jobId)).run();
}

export function nextWaitingJob(db: Queryable): string | undefined {
  return db
    .select({ id: packJobs.id })
    .from(packJobs)
    .where(eq(packJobs.state, 'waiting'))
    .orderBy(asc(packJobs.createdAtMs), asc(packJobs.id))
    .get()?.id;
}

export function listRunningJobs(db: Queryable): (typeof packJobs.$inferSelect)[] {
  return db.select().from(packJobs).where(eq(packJobs.state, 'running')).all();
}

export function countWaitingOf(db: Queryable, personId: string): number {
  return (
    db
      .select({ n: count() })
      .from(packJobs)
      .where(and(eq(packJobs.askedBy, personId), eq(packJobs.state, 'waiting')))
      .get()?.n ?? 0
  );
}

/** A waiting or running job of the same person for the same thing: asking twice is asking once. */
export function findOpenJobOf(
  db: Queryable,
  personId: string,
  packKey: string,
  revisionId: string,
  profileVersionId: string,
) {
  return db
    .select({ id: packJobs.id })
    .from(packJobs)
    .where(
      and(
        eq(packJobs.askedBy, personId),
        eq(packJobs.packKey, packKey),
        eq(packJobs.revisionId, revisionId),
        eq(packJobs.profileVersionId, profileVersionId),
        inArray(packJobs.state, ['waiting', 'running']),
      ),
    )
    .get();
}

export function insertDeviceCard(tx: Queryable, row: typeof deviceCards.$inferInsert): void {
  tx.insert(deviceCards).values(row).run();
}

/** Newest first. */
export function listDeviceCardRows(db: Queryable, packId: string, most: number) {
  return db
    .select({ card: deviceCards, enteredByName: users.name })
    .from(deviceCards)
    .innerJoin(users, eq(users.id, deviceCards.enteredBy))
    .where(eq(deviceCards.packId, packId))
    .orderBy(desc(deviceCards.enteredAtMs), desc(deviceCards.id))
    .limit(most)
    .all();
}
