import { and, desc, eq, max } from 'drizzle-orm';
import { alias } from 'drizzle-orm/sqlite-core';
import type { Queryable } from '@/db/openDatabase';
import { users } from '@/db/schema/people';
import { editions, revisions, withdrawals } from '@/db/schema/waveforms';

const withdrawers = alias(users, 'withdrawers');

const selectEditions = (db: Queryable) =>
  db
    .select({
      id: editions.id,
      waveformId: editions.waveformId,
      number: editions.number,
      revisionId: editions.revisionId,
      revisionNumber: revisions.number,
      title: editions.title,
      contentDigest: editions.contentDigest,
      documentDigest: revisions.documentDigest,
      releasedBy: editions.releasedBy,
      releasedByName: users.name,
      releasedAtMs: editions.releasedAtMs,
      withdrawnBy: withdrawals.withdrawnBy,
      withdrawnByName: withdrawers.name,
      withdrawnAtMs: withdrawals.withdrawnAtMs,
      withdrawnReason: withdrawals.reason,
    })
    .from(editions)
    .innerJoin(revisions, eq(revisions.id, editions.revisionId))
    .innerJoin(users, eq(users.id, editions.releasedBy))
    .leftJoin(withdrawals, eq(withdrawals.editionId, editions.id))
    .leftJoin(withdrawers, eq(withdrawers.id, withdrawals.withdrawnBy));

export type EditionRow = NonNullable<ReturnType<typeof findEdition>>;

export function findEdition(db: Queryable, waveformId: string, number: number) {
  return selectEditions(db)
    .where(and(eq(editions.waveformId, waveformId), eq(editions.number, number)))
    .get();
}

export function findEditionOfRevision(db: Queryable, revisionId: string) {
  return selectEditions(db).where(eq(editions.revisionId, revisionId)).get();
}

/** Newest first, withdrawn ones too. */
export function listEditionsOf(db: Queryable, waveformId: string) {
  return selectEditions(db).where(eq(editions.waveformId, waveformId)).orderBy(desc(editions.number)).all();
}

/** Of all waveforms, newest first within each. */
export function listAllEditions(db: Queryable) {
  return selectEditions(db).orderBy(desc(editions.number)).all();
}

/** Withdrawn numbers count: none is given twice. */
export function nextEditionNumber(db: Queryable, waveformId: string): number {
  const row = db
    .select({ last: max(editions.number) })
    .from(editions)
    .where(eq(editions.waveformId, waveformId))
    .get();
  return (row?.last ?? 0) + 1;
}
