import type { Queryable } from '@/db/openDatabase';
import type { Edition } from '@/lib/contracts/reviews';
import type { Waveform } from '@/lib/contracts/waveforms';
import { may, type Actor } from '../../auth/actor.ts';
import { isVisible, visibleWaveform } from '../../revisions/access.ts';
import { listEditionsOf } from '../../revisions/editionRepo.ts';
import { openReviewOf } from '../../revisions/openReview.ts';
import { findRevision, listRevisionsOf } from '../../revisions/revisionRepo.ts';
import { toEdition, toOneRevision } from '../../revisions/stamps.ts';
import { findHead } from './repo.ts';

/** The newest edition not withdrawn, else the newest one: what people who read editions only see of a waveform. */
export function shownEdition<T extends { number: number; withdrawn: unknown }>(
  newestFirst: readonly T[],
): T | undefined {
  return newestFirst.find((edition) => edition.withdrawn === null) ?? newestFirst[0];
}

export function showWaveformTo(db: Queryable, actor: Actor, waveformId: string): Waveform {
  const waveform = visibleWaveform(db, actor, waveformId);
  const readsDrafts = may(actor, 'readWaveforms');
  const editions: Edition[] = listEditionsOf(db, waveformId).map(toEdition);
  return {
    waveformId: waveform.id,
    title: readsDrafts ? waveform.title : (shownEdition(editions)?.title ?? ''),
    createdBy: { personId: waveform.createdBy, name: waveform.createdByName },
    createdAtMs: waveform.createdAtMs,
    source: sourceOf(db, actor, waveformId),
    head: readsDrafts ? toOneRevision(db, findHead(db, waveformId)) : null,
    editions,
    openReview: readsDrafts ? openReviewOf(db, actor, waveformId) : null,
  };
}

/** A copy's first revision names the revision it came from. */
function sourceOf(db: Queryable, actor: Actor, waveformId: string): Waveform['source'] {
  const [first] = listRevisionsOf(db, waveformId, 2, 1);
  const source = first?.parentId ? findRevision(db, first.parentId) : undefined;
  return source && isVisible(db, actor, source) ? { waveformId: source.waveformId, revisionId: source.id } : null;
}
