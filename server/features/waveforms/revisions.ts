import type { Queryable } from '@/db/openDatabase';
import { slugOf } from '@/lib/document/packNames';
import type { RevisionPoint } from '@/lib/contracts/reviews';
import { REVISIONS_MOST, type OpenedRevision, type Revision, type RevisionFigures } from '@/lib/contracts/waveforms';
import { may, type Actor } from '../../auth/actor.ts';
import type { Figures } from '../../figures/figures.ts';
import { visibleRevision, visibleWaveform } from '../../revisions/access.ts';
import { documentText } from '../../revisions/documents.ts';
import { listRevisionsOf, type RevisionRow } from '../../revisions/revisionRepo.ts';
import { toOneRevision, toPoint, toRevisions } from '../../revisions/stamps.ts';
import { findHead } from './repo.ts';

/** The head where somebody saved after this revision, or instead of it. */
function newerThan(db: Queryable, actor: Actor, revision: RevisionRow): RevisionPoint | null {
  if (revision.isHead || !may(actor, 'readWaveforms')) return null;
  const head = findHead(db, revision.waveformId);
  return head.number > revision.number || revision.isSide ? toPoint(head) : null;
}

export function createRevisionReader(db: Queryable, figures: Figures) {
  return {
    list(actor: Actor, waveformId: string, belowNumber?: number): { revisions: Revision[]; hasOlder: boolean } {
      visibleWaveform(db, actor, waveformId);
      const rows = listRevisionsOf(db, waveformId, belowNumber, REVISIONS_MOST + 1);
      return { revisions: toRevisions(db, rows.slice(0, REVISIONS_MOST)), hasOlder: rows.length > REVISIONS_MOST };
    },

    /** An OpenedRevision as text: the stored document goes through unparsed, since a large one would hold up everybody else for a second. */
    async opened(actor: Actor, revisionId: string): Promise<string> {
      const row = visibleRevision(db, actor, revisionId);
      const beside: Omit<OpenedRevision, 'document'> = {
        revision: toOneRevision(db, row),
        figures: figures.readAll([row.contentDigest])(row.contentDigest),
        newer: newerThan(db, actor, row),
      };
      return `{"document":${await documentText(db, row)},${JSON.stringify(beside).slice(1)}`;
    },

    figures(actor: Actor, revisionId: string) {
      const row = visibleRevision(db, actor, revisionId);
      const read: RevisionFigures = figures.readAll([row.contentDigest])(row.contentDigest);
      return { figures: read, stamp: toOneRevision(db, row).stamp, newer: newerThan(db, actor, row) };
    },

    /** The file as it is handed out: a name that tells ten of them apart, and the text. */
    async exported(actor: Actor, revisionId: string): Promise<{ fileName: string; text: string }> {
      const row = visibleRevision(db, actor, revisionId);
      const digits = row.documentDigest.slice('sha256:'.length, 'sha256:'.length + 8);
      return {
        fileName: `${slugOf(row.title, 60)}-r${row.number}-${digits}.combwright.json`,
        text: await documentText(db, row),
      };
    },
  };
}
