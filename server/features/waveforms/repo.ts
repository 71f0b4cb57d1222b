import { and, eq, isNotNull, or, sql } from 'drizzle-orm';
import type { Queryable } from '@/db/openDatabase';
import { packs } from '@/db/schema/packs';
import { users } from '@/db/schema/people';
import { revisions, waveforms } from '@/db/schema/waveforms';
import { findRevision, type RevisionRow } from '../../revisions/revisionRepo.ts';

export function insertWaveform(tx: Queryable, row: typeof waveforms.$inferInsert): void {
  tx.insert(waveforms).values(row).run();
}

export function insertRevision(tx: Queryable, row: typeof revisions.$inferInsert): void {
  tx.insert(revisions).values(row).run();
}

/** The waveform's title is its head's. */
export function moveHead(tx: Queryable, waveformId: string, revisionId: string, title: string, nowMs: number): void {
  tx.update(waveforms)
    .set({ headRevisionId: revisionId, title, changedAtMs: nowMs })
    .where(eq(waveforms.id, waveformId))
    .run();
}

export type HeadRow = ReturnType<typeof listHeads>[number];

/** Each waveform with its head and who saved it. */
export function listHeads(db: Queryable) {
  return db
    .select({
      waveformId: waveforms.id,
      revisionId: revisions.id,
      revisionNumber: revisions.number,
      title: revisions.title,
      contentDigest: revisions.contentDigest,
      documentDigest: revisions.documentDigest,
      authorId: revisions.authorId,
      authorName: users.name,
      createdAtMs: revisions.createdAtMs,
    })
    .from(waveforms)
    .innerJoin(revisions, eq(revisions.id, waveforms.headRevisionId))
    .innerJoin(users, eq(users.id, revisions.authorId))
    .all();
}

/** Waveforms in which the person saved any revision. */
export function waveformsOf(db: Queryable, personId: string): ReadonlySet<string> {
  const rows = db
    .selectDistinct({ waveformId: revisions.waveformId })
    .from(revisions)
    .where(eq(revisions.authorId, personId))
    .all();
  return new Set(rows.map((row) => row.waveformId));
}

/** Waveforms with a pack whose vector or zip has a digest that begins so: editions' packs, and those of the person's own drafts. */
export function waveformsOfPacks(db: Queryable, digitsStart: string, personId: string): ReadonlySet<string> {
  const startsWith = (column: unknown) => sql`substr(${column}, 1, ${digitsStart.length}) = ${digitsStart}`;
  const rows = db
    .selectDistinct({ waveformId: revisions.waveformId })
    .from(packs)
    .innerJoin(revisions, eq(revisions.id, packs.revisionId))
    .where(
      and(
        or(startsWith(packs.vectorSha256), startsWith(packs.fileSha256)),
        or(isNotNull(packs.editionId), eq(revisions.authorId, personId)),
      ),
    )
    .all();
  return new Set(rows.map((row) => row.waveformId));
}

/** What the same person sent late before, from the same parent. */
export function findSideRevision(
  db: Queryable,
  parentId: string,
  authorId: string,
  documentDigest: string,
): string | null {
  const row = db
    .select({ id: revisions.id })
    .from(revisions)
    .where(
      and(
        eq(revisions.parentId, parentId),
        eq(revisions.isSide, true),
        eq(revisions.authorId, authorId),
        eq(revisions.documentDigest, documentDigest),
      ),
    )
    .get();
  return row?.id ?? null;
}

/** The head of a waveform that is known to be there. */
export function findHead(db: Queryable, waveformId: string): RevisionRow {
  const row = db.select({ id: waveforms.headRevisionId }).from(waveforms).where(eq(waveforms.id, waveformId)).get();
  const head = row && findRevision(db, row.id);
  if (!head) throw new Error(`The waveform ${waveformId} has no head.`);
  return head;
}
