import type { Queryable } from '@/db/openDatabase';
import type { OpenReview, ReleasableBy } from '@/lib/contracts/reviews';
import { may, type Actor } from '../auth/actor.ts';
import { nextEditionNumber } from './editionRepo.ts';
import { listReviewers, peopleBarredBy } from './fourEyesRepo.ts';
import { findRevision, findWaveform } from './revisionRepo.ts';
import { toPoint } from './stamps.ts';
import { findOpenRequest } from './stateRepo.ts';

/** Four eyes by person. Where nobody is left, the words say who else is needed. */
export function releasableBy(db: Queryable, actor: Actor, revisionId: string): ReleasableBy {
  const barred = peopleBarredBy(db, revisionId);
  const reviewers = listReviewers(db);
  const people = reviewers.filter((person) => !barred.has(person.personId));
  const you = !may(actor, 'reviewWaveforms') ? 'notReviewer' : barred.has(actor.personId) ? 'ownWork' : 'yes';
  return { you, people, words: people.length > 0 ? null : neededWords(reviewers.map((person) => person.name)) };
}

function neededWords(reviewers: readonly string[]): string {
  const [only] = reviewers;
  if (only === undefined)
    return 'Nobody has the reviewer role yet. An admin can give it to somebody who drew no part of this.';
  const who =
    reviewers.length === 1
      ? `${only} is the only reviewer and drew a part of this`
      : `${reviewers.slice(0, -1).join(', ')} and ${reviewers.at(-1)} are the reviewers and each drew a part of this`;
  return `${who}. Somebody else with the reviewer role is needed; an admin can give it.`;
}

/** The waveform's open request as the asking person sees it; null where there is none. */
export function openReviewOf(db: Queryable, actor: Actor, waveformId: string): OpenReview | null {
  const request = findOpenRequest(db, waveformId);
  if (!request) return null;
  const revision = findRevision(db, request.revisionId);
  const waveform = findWaveform(db, waveformId);
  if (!revision || !waveform) throw new Error(`The request ${request.id} names a revision that is missing.`);
  const head = revision.isHead ? undefined : findRevision(db, waveform.headRevisionId);
  return {
    revisionId: revision.id,
    revisionNumber: revision.number,
    note: request.note,
    askedBy: { personId: request.askedBy, name: request.askedByName },
    askedAtMs: request.askedAtMs,
    nextEditionNumber: nextEditionNumber(db, waveformId),
    newer: head && head.number > revision.number ? toPoint(head) : null,
    releasableBy: releasableBy(db, actor, revision.id),
  };
}
