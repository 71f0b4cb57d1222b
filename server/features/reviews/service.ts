import { recordAct } from '@/db/audit';
import type { Queryable } from '@/db/openDatabase';
import type { Edition, OpenReview, RevisionState, StateStamp } from '@/lib/contracts/reviews';
import { requireRight, type Actor } from '../../auth/actor.ts';
import type { Deps } from '../../deps.ts';
import { DomainError, invalidField } from '../../problem.ts';
import { visibleWaveform } from '../../revisions/access.ts';
import { findEdition, nextEditionNumber } from '../../revisions/editionRepo.ts';
import { openReviewOf, releasableBy } from '../../revisions/openReview.ts';
import { findRevision, type RevisionRow } from '../../revisions/revisionRepo.ts';
import { toEdition, toOneRevision } from '../../revisions/stamps.ts';
import { addTransition, findOpenRequest, newestStates, type RequestRow } from '../../revisions/stateRepo.ts';
import { closeRequest, insertEdition, insertRequest } from './repo.ts';

const stateWords: Record<RevisionState, string> = {
  draft: 'a draft',
  inReview: 'in review',
  released: 'released',
  withdrawn: 'withdrawn',
};

interface StampAnswer {
  revisionId: string;
  stamp: StateStamp;
}

/** Every transition but the withdrawal. Each is one transaction with its audit row; all that the table of transitions does not name is a conflict. */
export function createReviewsService(deps: Deps) {
  const { store, clock } = deps;

  function requireRevision(tx: Queryable, waveformId: string, revisionId: string): RevisionRow {
    const revision = findRevision(tx, revisionId);
    if (revision?.waveformId !== waveformId)
      throw invalidField('/revisionId', 'This is no revision of the waveform.', 'not_found');
    return revision;
  }

  /** The open request, which must be for the revision that the person looked at. */
  function requireRequest(tx: Queryable, waveformId: string, revision: RevisionRow): RequestRow {
    const request = findOpenRequest(tx, waveformId);
    if (request?.revisionId === revision.id) return request;
    const state = newestStates(tx, [revision.id]).get(revision.id)?.state ?? 'draft';
    throw new DomainError('state_conflict', {
      detail: `Revision ${revision.number} is not in review: it is ${stateWords[state]}.`,
      facts: { state, openRevisionId: request?.revisionId ?? null },
    });
  }

  function record(
    tx: Queryable,
    actor: Actor,
    act: string,
    revision: RevisionRow,
    requestId: string | null,
    detail = {},
  ) {
    recordAct(tx, {
      atMs: clock.nowMs(),
      personId: actor.personId,
      act: `revision.${act}`,
      objectKind: 'revision',
      objectId: revision.id,
      objectLabel: `${revision.title}, revision ${revision.number}`,
      detail: { waveformId: revision.waveformId, ...detail },
      requestId,
    });
  }

  /** Return and taking back: the request ends, the revision is a draft again and carries the reason. */
  function sendBack(
    actor: Actor,
    waveformId: string,
    revisionId: string,
    outcome: 'returned' | 'takenBack',
    reason: string,
    requestId: string | null,
  ): StampAnswer {
    return store.write((tx) => {
      visibleWaveform(tx, actor, waveformId);
      const revision = requireRevision(tx, waveformId, revisionId);
      const request = requireRequest(tx, waveformId, revision);
      const atMs = clock.nowMs();
      closeRequest(tx, request.id, { outcome, closedBy: actor.personId, closedAtMs: atMs, reason });
      addTransition(tx, {
        revisionId,
        state: 'draft',
        act: outcome,
        note: reason,
        personId: actor.personId,
        atMs,
      });
      record(tx, actor, outcome, revision, requestId, { reason });
      return { revisionId, stamp: toOneRevision(tx, revision).stamp };
    });
  }

  return {
    show(actor: Actor, waveformId: string): OpenReview | null {
      visibleWaveform(store.db, actor, waveformId);
      return openReviewOf(store.db, actor, waveformId);
    },

    ask(actor: Actor, waveformId: string, revisionId: string, note: string, requestId: string | null): OpenReview {
      requireRight(actor, 'saveWaveforms');
      return store.write((tx) => {
        visibleWaveform(tx, actor, waveformId);
        const revision = requireRevision(tx, waveformId, revisionId);
        const open = findOpenRequest(tx, waveformId);
        if (open) {
          throw new DomainError('state_conflict', {
            detail: `${open.askedByName} has already asked for a review of this waveform.`,
            facts: { state: 'inReview', openRevisionId: open.revisionId },
          });
        }
        const state = newestStates(tx, [revisionId]).get(revisionId)?.state ?? 'draft';
        if (state !== 'draft') {
          throw new DomainError('state_conflict', {
            detail: `Revision ${revision.number} is ${stateWords[state]}. Only a draft can be reviewed.`,
            facts: { state, openRevisionId: null },
          });
        }
        const atMs = clock.nowMs();
        insertRequest(tx, { id: deps.newId(), waveformId, revisionId, note, askedBy: actor.personId, askedAtMs: atMs });
        addTransition(tx, { revisionId, state: 'inReview', act: 'asked', note, personId: actor.personId, atMs });
        record(tx, actor, 'asked', revision, requestId, { note });
        return openReviewOf(tx, actor, waveformId)!;
      });
    },

    takeBack(
      actor: Actor,
      waveformId: string,
      revisionId: string,
      reason: string,
      requestId: string | null,
    ): StampAnswer {
      requireRight(actor, 'saveWaveforms');
      return sendBack(actor, waveformId, revisionId, 'takenBack', reason, requestId);
    },

    returnWithReason(
      actor: Actor,
      waveformId: string,
      revisionId: string,
      reason: string,
      requestId: string | null,
    ): StampAnswer {
      requireRight(actor, 'reviewWaveforms');
      return sendBack(actor, waveformId, revisionId, 'returned', reason, requestId);
    },

    /** Four eyes by person; the edition takes the next number and never changes. */
    release(actor: Actor, waveformId: string, revisionId: string, requestId: string | null): Edition {
      requireRight(actor, 'reviewWaveforms');
      return store.write((tx) => {
        visibleWaveform(tx, actor, waveformId);
        const revision = requireRevision(tx, waveformId, revisionId);
        const request = requireRequest(tx, waveformId, revision);
        const who = releasableBy(tx, actor, revisionId);
        if (who.you === 'ownWork') {
          throw new DomainError('own_work', {
            detail: who.words ?? 'You drew a part of this. Somebody else releases it.',
            facts: { releasableBy: who },
          });
        }
        const atMs = clock.nowMs();
        const number = nextEditionNumber(tx, waveformId);
        insertEdition(tx, {
          id: deps.newId(),
          waveformId,
          number,
          revisionId,
          title: revision.title,
          contentDigest: revision.contentDigest,
          releasedBy: actor.personId,
          releasedAtMs: atMs,
          note: request.note,
        });
        const end = { outcome: 'released' as const, closedBy: actor.personId, closedAtMs: atMs, reason: null };
        closeRequest(tx, request.id, end);
        addTransition(tx, { revisionId, state: 'released', act: 'released', note: '', personId: actor.personId, atMs });
        record(tx, actor, 'released', revision, requestId, { editionNumber: number });
        return toEdition(findEdition(tx, waveformId, number)!);
      });
    },
  };
}
