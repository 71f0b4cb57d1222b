import type { Queryable } from '@/db/openDatabase';
import { may, type Actor } from '../auth/actor.ts';
import { authorizeRead, type Authorized } from '../auth/authorized.ts';
import { findEditionOfRevision, listEditionsOf } from './editionRepo.ts';
import { findRevision, findWaveform, type RevisionRow, type WaveformRow } from './revisionRepo.ts';

/** Authors and reviewers see every waveform; the others those with an edition, withdrawn or not. The rest is not there. */
export function visibleWaveform(db: Queryable, actor: Actor, waveformId: string): Authorized<WaveformRow> {
  return authorizeRead(
    actor,
    'readEditions',
    findWaveform(db, waveformId),
    (waveform) => may(actor, 'readWaveforms') || listEditionsOf(db, waveform.id).length > 0,
  );
}

export function visibleRevision(db: Queryable, actor: Actor, revisionId: string): Authorized<RevisionRow> {
  return authorizeRead(actor, 'readEditions', findRevision(db, revisionId), (revision) =>
    isVisible(db, actor, revision),
  );
}

export function isVisible(db: Queryable, actor: Actor, revision: RevisionRow): boolean {
  return may(actor, 'readWaveforms') || findEditionOfRevision(db, revision.id) !== undefined;
}
