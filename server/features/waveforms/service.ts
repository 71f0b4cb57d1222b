import { promisify } from 'node:util';
import { gzip } from 'node:zlib';
import { recordAct } from '@/db/audit';
import type { Queryable } from '@/db/openDatabase';
import type { SavedDocument } from '@/lib/contracts/savedDocument';
import type { SaveAnswer, StaleFacts, Waveform } from '@/lib/contracts/waveforms';
import { requireRight, type Actor } from '../../auth/actor.ts';
import type { Deps } from '../../deps.ts';
import type { Figures } from '../../figures/figures.ts';
import { findResult, rememberResult, type KeyedRequest } from '../../idempotencyRepo.ts';
import { DomainError, invalidField } from '../../problem.ts';
import { visibleRevision, visibleWaveform } from '../../revisions/access.ts';
import { putContent, type PackedContent } from '../../revisions/contentRepo.ts';
import { openReviewOf } from '../../revisions/openReview.ts';
import { findRevision, nextRevisionNumber, type RevisionRow } from '../../revisions/revisionRepo.ts';
import { toOneRevision, toPoint } from '../../revisions/stamps.ts';
import * as repo from './repo.ts';
import { showWaveformTo } from './show.ts';

const deflate = promisify(gzip);

async function packContent(saved: SavedDocument): Promise<PackedContent> {
  const bytes = await deflate(saved.contentJson);
  return { digest: saved.contentDigest, bytes, jsonBytes: Buffer.byteLength(saved.contentJson) };
}

/** How a request came: its id in the audit, and its key where it may be sent twice. */
export interface Sent {
  requestId: string | null;
  idempotencyKey: string | null;
}

export function createWaveformsService(deps: Deps, figures: Figures) {
  const { store, clock } = deps;

  function keyed(actor: Actor, endpoint: string, sent: Sent, asked: string[]): KeyedRequest | null {
    return sent.idempotencyKey === null
      ? null
      : { personId: actor.personId, endpoint, key: sent.idempotencyKey, asked };
  }

  interface Addition {
    waveformId: string;
    number: number;
    parentId: string | null;
    isSide: boolean;
  }

  /** Content, revision, figures to come and audit row: all in the caller's transaction. */
  function addRevision(
    tx: Queryable,
    actor: Actor,
    saved: SavedDocument,
    content: PackedContent,
    add: Addition,
  ): string {
    const nowMs = clock.nowMs();
    const id = deps.newId();
    putContent(tx, content, nowMs);
    repo.insertRevision(tx, {
      id,
      ...add,
      contentDigest: saved.contentDigest,
      intentDigest: saved.intentDigest,
      documentDigest: saved.documentDigest,
      title: saved.title,
      aboutJson: saved.aboutJson,
      intentJson: saved.intentJson,
      authorId: actor.personId,
      createdAtMs: nowMs,
    });
    figures.begin(tx, saved);
    return id;
  }

  function record(tx: Queryable, actor: Actor, sent: Sent, act: string, objectId: string, objectLabel: string): void {
    const [objectKind] = act.split('.');
    recordAct(tx, {
      atMs: clock.nowMs(),
      personId: actor.personId,
      act,
      objectKind: objectKind!,
      objectId,
      objectLabel,
      requestId: sent.requestId,
    });
  }

  /** Answers the id of the revision that the save made or found, side revisions too. */
  function saveIn(
    tx: Queryable,
    actor: Actor,
    waveformId: string,
    parentId: string,
    saved: SavedDocument,
    content: PackedContent,
    sent: Sent,
  ): string {
    const waveform = visibleWaveform(tx, actor, waveformId);
    const request = keyed(actor, 'saveRevision', sent, [waveformId, parentId, saved.documentDigest]);
    const before = request && findResult(tx, request);
    if (before) return before;
    const parent = findRevision(tx, parentId);
    if (parent?.waveformId !== waveformId)
      throw invalidField('/query/parentId', 'The parent is no revision of this waveform.');
    const revisionId = ((): string => {
      if (parent.documentDigest === saved.documentDigest) return parent.id;
      const isSide = !parent.isHead;
      // A client that sends the same late save again and again keeps one copy of it.
      const kept = isSide && repo.findSideRevision(tx, parent.id, actor.personId, saved.documentDigest);
      if (kept) return kept;
      const number = nextRevisionNumber(tx, waveformId);
      const id = addRevision(tx, actor, saved, content, { waveformId, number, parentId: parent.id, isSide });
      if (!isSide) repo.moveHead(tx, waveform.id, id, saved.title, clock.nowMs());
      record(
        tx,
        actor,
        sent,
        isSide ? 'revision.keptAside' : 'revision.saved',
        id,
        `${saved.title}, revision ${number}`,
      );
      return id;
    })();
    if (request) rememberResult(tx, request, revisionId, clock.nowMs());
    return revisionId;
  }

  function headOf(waveformId: string): RevisionRow {
    return repo.findHead(store.db, waveformId);
  }

  return {
    /** A new waveform from a whole document. A copy or an import names the revision it came from, which four eyes then follow. */
    async create(actor: Actor, saved: SavedDocument, sourceRevisionId: string | null, sent: Sent): Promise<Waveform> {
      requireRight(actor, 'saveWaveforms');
      const content = await packContent(saved);
      const waveformId = store.write((tx) => {
        const request = keyed(actor, 'createWaveform', sent, [sourceRevisionId ?? '', saved.documentDigest]);
        const before = request && findResult(tx, request);
        if (before) return before;
        const source = sourceRevisionId === null ? null : visibleRevision(tx, actor, sourceRevisionId);
        const id = deps.newId();
        const nowMs = clock.nowMs();
        const people = { createdBy: actor.personId, createdAtMs: nowMs };
        repo.insertWaveform(tx, { id, ...people, headRevisionId: '', title: saved.title, changedAtMs: nowMs });
        const addition = { waveformId: id, number: 1, parentId: source?.id ?? null, isSide: false };
        const revisionId = addRevision(tx, actor, saved, content, addition);
        repo.moveHead(tx, id, revisionId, saved.title, nowMs);
        record(tx, actor, sent, 'waveform.created', id, saved.title);
        if (request) rememberResult(tx, request, id, nowMs);
        return id;
      });
      figures.want(saved.contentDigest);
      return showWaveformTo(store.db, actor, waveformId);
    },

    /**
     * Saves the document after its parent. Equal to the parent: nothing is added. The parent is no longer the head: the document is kept as a
     * side revision, and the save is refused with both, so that nothing is lost and nobody's head is overwritten.
     */
    async save(
      actor: Actor,
      waveformId: string,
      parentId: string,
      saved: SavedDocument,
      sent: Sent,
    ): Promise<SaveAnswer> {
      requireRight(actor, 'saveWaveforms');
      const content = await packContent(saved);
      const revisionId = store.write((tx) => saveIn(tx, actor, waveformId, parentId, saved, content, sent));
      const revision = findRevision(store.db, revisionId)!;
      const head = headOf(waveformId);
      const isUnchanged = revisionId === parentId;
      if (revision.isSide && !isUnchanged) throw stale(head, revision);
      figures.want(saved.contentDigest);
      return {
        revision: toOneRevision(store.db, revision),
        isUnchanged,
        newer: revision.isHead ? null : toPoint(head),
        openReview: openReviewOf(store.db, actor, waveformId),
      };
    },
  };
}

function stale(head: RevisionRow, kept: RevisionRow): DomainError {
  const facts: StaleFacts = { newer: toPoint(head), kept: toPoint(kept) };
  return new DomainError('stale_revision', {
    detail: `${head.authorName} saved revision ${head.number} first. What you sent is kept as revision ${kept.number}.`,
    facts: { ...facts },
  });
}
