import type { Queryable } from '@/db/openDatabase';
import type { Edition, RevisionPoint, StateStamp } from '@/lib/contracts/reviews';
import type { Revision } from '@/lib/contracts/waveforms';
import { listEditionsOf, type EditionRow } from './editionRepo.ts';
import type { RevisionRow } from './revisionRepo.ts';
import { newestStates, type StateRow } from './stateRepo.ts';

interface SavedRevision {
  authorId: string;
  authorName: string;
  createdAtMs: number;
}

/** A revision without any transition is a draft as its author saved it. */
export function toStamp(saved: SavedRevision, newest: StateRow | undefined, editionNumber: number | null): StateStamp {
  if (!newest) {
    const by = { personId: saved.authorId, name: saved.authorName };
    return { state: 'draft', editionNumber: null, reason: null, cameBack: null, atMs: saved.createdAtMs, by };
  }
  return {
    state: newest.state,
    editionNumber,
    reason: newest.note === '' ? null : newest.note,
    cameBack: newest.act === 'returned' || newest.act === 'takenBack' ? newest.act : null,
    atMs: newest.atMs,
    by: { personId: newest.personId, name: newest.personName },
  };
}

function toRevision(row: RevisionRow, stamp: StateStamp): Revision {
  return {
    waveformId: row.waveformId,
    revisionId: row.id,
    number: row.number,
    parentId: row.parentId,
    savedBy: { personId: row.authorId, name: row.authorName },
    savedAtMs: row.createdAtMs,
    title: row.title,
    contentDigest: row.contentDigest,
    intentDigest: row.intentDigest,
    documentDigest: row.documentDigest,
    isHead: row.isHead,
    isSide: row.isSide,
    stamp,
  };
}

/** Rows of one waveform as the API shows them. */
export function toRevisions(db: Queryable, rows: readonly RevisionRow[]): Revision[] {
  const first = rows[0];
  if (!first) return [];
  const states = newestStates(
    db,
    rows.map((row) => row.id),
  );
  const numbers = new Map(listEditionsOf(db, first.waveformId).map((edition) => [edition.revisionId, edition.number]));
  return rows.map((row) => toRevision(row, toStamp(row, states.get(row.id), numbers.get(row.id) ?? null)));
}

export function toOneRevision(db: Queryable, row: RevisionRow): Revision {
  const [revision] = toRevisions(db, [row]);
  return revision!;
}

export function toPoint(row: RevisionRow): RevisionPoint {
  return {
    revisionId: row.id,
    number: row.number,
    savedBy: { personId: row.authorId, name: row.authorName },
    savedAtMs: row.createdAtMs,
  };
}

export function toEdition(row: EditionRow): Edition {
  return {
    waveformId: row.waveformId,
    number: row.number,
    revisionId: row.revisionId,
    revisionNumber: row.revisionNumber,
    title: row.title,
    contentDigest: row.contentDigest,
    documentDigest: row.documentDigest,
    releasedBy: { personId: row.releasedBy, name: row.releasedByName },
    releasedAtMs: row.releasedAtMs,
    withdrawn:
      row.withdrawnBy === null
        ? null
        : {
            by: { personId: row.withdrawnBy, name: row.withdrawnByName ?? '' },
            atMs: row.withdrawnAtMs ?? 0,
            reason: row.withdrawnReason ?? '',
          },
  };
}
