import { statfs } from 'node:fs/promises';
import { recordAct } from '@/db/audit';
import type { DeviceCard, DeviceIntent, Pack, PackDetail, PackJob } from '@/lib/contracts/packs';
import type { Manifest } from '@/lib/document/manifestSchema';
import type { BenchProfile } from '@/lib/synth';
import { may, requireRight, type Actor } from '../../auth/actor.ts';
import { authorizeAct, authorizeRead, type Authorized } from '../../auth/authorized.ts';
import type { Deps } from '../../deps.ts';
import { createAskFit, type AskFit } from '../../fit/fitThread.ts';
import { findResult, rememberResult, type KeyedRequest } from '../../idempotencyRepo.ts';
import { roomRatio } from '../../packs/estimate.ts';
import { withdrawnWords, type PackJobs } from '../../packs/jobs.ts';
import { DomainError } from '../../problem.ts';
import { visibleRevision } from '../../revisions/access.ts';
import { documentText } from '../../revisions/documents.ts';
import { findEditionOfRevision } from '../../revisions/editionRepo.ts';
import { readAboutAndIntent, type RevisionRow } from '../../revisions/revisionRepo.ts';
import * as repo from './repo.ts';
import { timeWords, toDeviceCard, toPack, toPackDetail, toPackJob, type CardSource } from './views.ts';

const mostWaitingJobs = 3;
const mostListed = 100;
const mostDeviceCards = 50;
const failedShownMs = 24 * 60 * 60 * 1000;
/** Fewer digits would find by chance. */
const digestStart = /^(?:sha256:)?([0-9a-f]{4,64})$/;

export interface Sent {
  requestId: string | null;
  idempotencyKey: string | null;
}

export interface PackFile {
  file: string;
  fileName: string;
  fileSha256: string;
  editionId: string | null;
}

export type FreeBytes = (folder: string) => Promise<number>;

const freeBytesOf: FreeBytes = async (folder) => {
  const { bavail, bsize } = await statfs(folder);
  return bavail * bsize;
};

const inUnits = (bytes: number): string =>
  bytes >= 1e9 ? `${(bytes / 1e9).toFixed(1)} GB` : `${Math.max(0.1, bytes / 1e6).toFixed(1)} MB`;

export type PacksService = ReturnType<typeof createPacksService>;

export function createPacksService(
  deps: Deps,
  jobs: PackJobs,
  freeBytes: FreeBytes = freeBytesOf,
  ask: AskFit = createAskFit(deps.config.buildDir),
) {
  const { store, clock, config } = deps;

  /** An edition's packs are everybody's, a draft's its author's alone: to others they are not there. */
  const mayDraft = (actor: Actor, authorId: string) => may(actor, 'makeDraftPacks') && authorId === actor.personId;

  function visiblePack(actor: Actor, packId: string): Authorized<repo.PackRow> {
    return authorizeRead(
      actor,
      'readEditions',
      repo.findPack(store.db, packId),
      (pack) => pack.editionId !== null || mayDraft(actor, pack.revisionAuthorId),
    );
  }

  const seesJob = (actor: Actor, row: repo.JobRow) =>
    row.job.editionId !== null || mayDraft(actor, row.revisionAuthorId) || row.job.askedBy === actor.personId;

  const jobView = (jobId: string): PackJob => toPackJob(repo.findJob(store.db, jobId)!, jobs.progressOf(jobId));

  /** Edition or draft, with the rights for it; a withdrawn edition is refused with its reason. */
  function makeable(actor: Actor, revisionId: string) {
    const revision = visibleRevision(store.db, actor, revisionId);
    const edition = findEditionOfRevision(store.db, revisionId);
    if (!edition) {
      if (revision.authorId !== actor.personId && may(actor, 'makeDraftPacks'))
        throw new DomainError('action_forbidden', `Only ${revision.authorName} may make a pack of this draft.`);
      authorizeAct(actor, 'makeDraftPacks', revision);
      return { revision, edition: null };
    }
    requireRight(actor, 'makeEditionPacks');
    if (edition.withdrawnBy !== null) throw withdrawnError(edition.number, edition.withdrawnReason);
    return { revision, edition };
  }

  async function requireRoom(bytes: number): Promise<void> {
    if (bytes > config.packBytesMost)
      throw new DomainError(
        'too_large',
        `The pack would take ${inUnits(bytes)}; the limit here is ${inUnits(config.packBytesMost)}.`,
      );
    const free = await freeBytes(config.dataDir);
    if (roomRatio * bytes > free)
      throw new DomainError(
        'no_room',
        `No room to write: ${inUnits(roomRatio * bytes)} are needed, ${inUnits(free)} are free. Tell an admin.`,
      );
  }

  /** What the page says before anything is rendered, with the finding's own words. */
  async function checked(revision: RevisionRow, profile: BenchProfile, state: number | 'draft') {
    const { refusal, packKey, bytes } = await ask({
      kind: 'pack',
      documentText: await documentText(store.db, revision),
      profileJson: JSON.stringify(profile),
      state,
    });
    if (refusal && (refusal.code === 'limit_missed' || refusal.code === 'not_supported_yet')) {
      const issues = refusal.issues.map(({ pointer, message }) => ({ pointer, message, code: refusal.code }));
      throw new DomainError(refusal.code as 'limit_missed', { detail: refusal.message, issues });
    }
    return { packKey, bytes };
  }

  function sourceOf(row: repo.PackRow): CardSource {
    const { intentJson } = readAboutAndIntent(store.db, row.revisionId);
    return {
      manifest: JSON.parse(repo.readManifestJson(store.db, row.id)) as Manifest,
      intent: JSON.parse(intentJson) as DeviceIntent,
      benchProfile: JSON.parse(repo.readProfileJson(store.db, row.profileVersionId)) as BenchProfile,
      state: toPack(row).state,
      editionNumber: row.editionNumber,
      vectorSha256: row.vectorSha256,
      fetched: timeWords(clock.nowMs()),
    };
  }

  return {
    async make(
      actor: Actor,
      asked: { revisionId: string; benchId: string; benchVersion?: number | undefined },
      sent: Sent,
    ): Promise<PackJob> {
      const { revision, edition } = makeable(actor, asked.revisionId);
      const version = authorizeRead(
        actor,
        'readBenches',
        repo.findProfileVersion(store.db, asked.benchId, asked.benchVersion),
      );
      const keyed: KeyedRequest | null =
        sent.idempotencyKey === null
          ? null
          : {
              personId: actor.personId,
              endpoint: 'makePack',
              key: sent.idempotencyKey,
              asked: [asked.revisionId, asked.benchId, String(asked.benchVersion ?? '')],
            };
      const before = keyed && findResult(store.db, keyed);
      if (before) return jobView(before);
      const profile = JSON.parse(version.profileJson) as BenchProfile;
      const { packKey, bytes } = await checked(revision, profile, edition?.number ?? 'draft');
      const stored = repo.findStored(store.db, packKey);
      const isStored = stored !== undefined && (await jobs.findFile(stored)) !== null;
      if (!isStored) await requireRoom(bytes);

      const jobId = store.write((tx) => {
        const same = keyed && findResult(tx, keyed);
        if (same) return same;
        // The state may have moved while the document was read.
        makeable(actor, asked.revisionId);
        const open = repo.findOpenJobOf(tx, actor.personId, packKey, revision.id, version.id);
        if (open) return open.id;
        if (!isStored && repo.countWaitingOf(tx, actor.personId) >= mostWaitingJobs)
          throw new DomainError(
            'too_many',
            `${mostWaitingJobs} packs of yours wait already. Ask again when one is made.`,
          );
        const nowMs = clock.nowMs();
        const id = deps.newId();
        repo.insertJob(tx, {
          id,
          packKey,
          revisionId: revision.id,
          editionId: edition?.id ?? null,
          profileVersionId: version.id,
          askedBy: actor.personId,
          state: 'waiting',
          createdAtMs: nowMs,
        });
        if (keyed) rememberResult(tx, keyed, id, nowMs);
        return id;
      });
      if (isStored) jobs.finishStored(jobId);
      else jobs.wake();
      return jobView(jobId);
    },

    list(
      actor: Actor,
      asked: {
        find?: string | undefined;
        waveformId?: string | undefined;
        revisionId?: string | undefined;
        benchId?: string | undefined;
      },
    ): { items: Pack[]; more: number } {
      const { find, ...filter } = asked;
      const wanted = find === undefined || find === '' ? undefined : find;
      const { rows, more } = repo.listPackRows(
        store.db,
        {
          ...filter,
          draftsOf: may(actor, 'makeDraftPacks') ? actor.personId : null,
          title: wanted,
          digestStart: wanted === undefined ? undefined : digestStart.exec(wanted.toLowerCase())?.[1],
        },
        mostListed,
      );
      return { items: rows.map(toPack), more };
    },

    show(actor: Actor, packId: string): PackDetail {
      const row = visiblePack(actor, packId);
      const source = sourceOf(row);
      const cards = repo
        .listDeviceCardRows(store.db, row.id, mostDeviceCards)
        .map((card) => toDeviceCard(card, source));
      return toPackDetail(row, source, cards, clock.nowMs());
    },

    /** The stored file, with every right and state asked anew. */
    async file(actor: Actor, packId: string): Promise<PackFile> {
      const offered = () => {
        const row = visiblePack(actor, packId);
        if (row.withdrawnBy !== null) throw withdrawnError(row.editionNumber, row.withdrawnReason);
        return row;
      };
      const row = offered();
      const file = await jobs.findFile(row);
      // A withdrawal while the disk was asked found no download to cut.
      offered();
      if (file === null)
        throw new DomainError('not_found', 'The stored file is not there any more. Make the pack again.');
      return { file, fileName: row.fileName, fileSha256: row.fileSha256, editionId: row.editionId };
    },

    noteDownload(actor: Actor, packId: string, fileName: string, requestId: string | null): void {
      store.write((tx) =>
        recordAct(tx, {
          atMs: clock.nowMs(),
          personId: actor.personId,
          act: 'pack.downloaded',
          objectKind: 'pack',
          objectId: packId,
          objectLabel: fileName,
          requestId,
        }),
      );
    },

    /** Another device at the bench: kept beside the pack for ever; its own card and file stay as they were reviewed. */
    enterDeviceCard(
      actor: Actor,
      packId: string,
      entered: { deviceName: string; intent: DeviceIntent },
      sent: Sent,
    ): DeviceCard {
      const row = visiblePack(actor, packId);
      requireRight(actor, 'enterDeviceCards');
      if (row.withdrawnBy !== null) throw withdrawnError(row.editionNumber, row.withdrawnReason);
      const source = sourceOf(row);
      const cardId = store.write((tx) => {
        const intentJson = JSON.stringify(entered.intent);
        const keyed: KeyedRequest | null =
          sent.idempotencyKey === null
            ? null
            : {
                personId: actor.personId,
                endpoint: 'enterDeviceCard',
                key: sent.idempotencyKey,
                asked: [packId, entered.deviceName, intentJson],
              };
        const before = keyed && findResult(tx, keyed);
        if (before) return before;
        const id = deps.newId();
        const nowMs = clock.nowMs();
        repo.insertDeviceCard(tx, {
          id,
          packId,
          deviceName: entered.deviceName,
          intentJson,
          enteredBy: actor.personId,
          enteredAtMs: nowMs,
        });
        recordAct(tx, {
          atMs: nowMs,
          personId: actor.personId,
          act: 'pack.cardEntered',
          objectKind: 'pack',
          objectId: packId,
          objectLabel: row.fileName,
          detail: { deviceName: entered.deviceName, ...entered.intent },
          requestId: sent.requestId,
        });
        if (keyed) rememberResult(tx, keyed, id, nowMs);
        return id;
      });
      const card = repo
        .listDeviceCardRows(store.db, packId, mostDeviceCards)
        .find(({ card: one }) => one.id === cardId);
      return toDeviceCard(card!, source);
    },

    listJobs(actor: Actor): { items: PackJob[] } {
      const rows = repo.listJobRows(store.db, clock.nowMs() - failedShownMs, mostListed);
      return {
        items: rows.filter((row) => seesJob(actor, row)).map((row) => toPackJob(row, jobs.progressOf(row.job.id))),
      };
    },

    showJob(actor: Actor, jobId: string): PackJob {
      const row = authorizeRead(actor, 'readEditions', repo.findJob(store.db, jobId), (job) => seesJob(actor, job));
      return toPackJob(row, jobs.progressOf(jobId));
    },

    cancelJob(actor: Actor, jobId: string): PackJob {
      const row = authorizeRead(actor, 'readEditions', repo.findJob(store.db, jobId), (job) => seesJob(actor, job));
      if (row.job.askedBy !== actor.personId) requireRight(actor, 'managePeople');
      jobs.cancel(jobId);
      return jobView(jobId);
    },
  };
}

export function withdrawnError(editionNumber: number | null, reason: string | null): DomainError {
  return new DomainError('edition_withdrawn', {
    detail: withdrawnWords(editionNumber, reason),
    facts: { editionNumber, reason },
  });
}
