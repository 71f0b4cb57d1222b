import { and, desc, eq, lt, max, sql } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { users } from '@/db/schema/people';
import { revisions, waveforms } from '@/db/schema/waveforms';

const revisionColumns = {
  id: revisions.id,
  waveformId: revisions.waveformId,
  number: revisions.number,
  parentId: revisions.parentId,
  isSide: revisions.isSide,
  contentDigest: revisions.contentDigest,
  intentDigest: revisions.intentDigest,
  documentDigest: revisions.documentDigest,
  title: revisions.title,
  authorId: revisions.authorId,
  authorName: users.name,
  createdAtMs: revisions.createdAtMs,
  isHead: sql<number>`${revisions.id} = ${waveforms.headRevisionId}`.mapWith(Boolean),
};

const selectRevisions = (db: Queryable) =>
  db
    .select(revisionColumns)
    .from(revisions)
    .innerJoin(users, eq(users.id, revisions.authorId))
    .innerJoin(waveforms, eq(waveforms.id, revisions.waveformId));

export type RevisionRow = NonNullable<ReturnType<typeof findRevision>>;

export function findRevision(db: Queryable, revisionId: string) {
  return selectRevisions(db).where(eq(revisions.id, revisionId)).get();
}

/** Newest first by number, which a clock that jumps back does not disturb. */
export function listRevisionsOf(db: Queryable, waveformId: string, belowNumber: number | undefined, most: number) {
  const below = belowNumber === undefined ? undefined : lt(revisions.number, belowNumber);
  return selectRevisions(db)
    .where(and(eq(revisions.waveformId, waveformId), below))
    .orderBy(desc(revisions.number))
    .limit(most)
    .all();
}

/** The parts of a document that a revision keeps itself; its content lies in `contents`. */
export function readAboutAndIntent(db: Queryable, revisionId: string): { aboutJson: string; intentJson: string } {
  const row = db
    .select({ aboutJson: revisions.aboutJson, intentJson: revisions.intentJson })
    .from(revisions)
    .where(eq(revisions.id, revisionId))
    .get();
  if (!row) throw new Error(`The revision ${revisionId} is missing.`);
  return row;
}

const waveformColumns = {
  id: waveforms.id,
  createdBy: waveforms.createdBy,
  createdByName: users.name,
  createdAtMs: waveforms.createdAtMs,
  headRevisionId: waveforms.headRevisionId,
  title: waveforms.title,
  changedAtMs: waveforms.changedAtMs,
};

export type WaveformRow = NonNullable<ReturnType<typeof findWaveform>>;

export function findWaveform(db: Queryable, waveformId: string) {
  return db
    .select(waveformColumns)
    .from(waveforms)
    .innerJoin(users, eq(users.id, waveforms.createdBy))
    .where(eq(waveforms.id, waveformId))
    .get();
}

export function nextRevisionNumber(tx: Queryable, waveformId: string): number {
  const row = tx
    .select({ last: max(revisions.number) })
    .from(revisions)
    .where(eq(revisions.waveformId, waveformId))
    .get();
  return (row?.last ?? 0) + 1;
}
