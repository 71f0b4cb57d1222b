import { mkdirSync } from 'node:fs';
import { stat } from 'node:fs/promises';
import path from 'node:path';
import { recordAct } from '@/db/audit';
import type { ProblemCode } from '@/lib/contracts/problem';
import type { BenchProfile } from '@/lib/synth';
import type { Deps } from '../deps.ts';
import * as repo from '../features/packs/repo.ts';
import { readDocument } from '../revisions/documents.ts';
import type { PackErrorCode } from './packError.ts';
import type { MadePack, PackProgress, PackResult } from './packTypes.ts';
import type { Rendering } from './renderThread.ts';
import { sweepWorkFolders } from './tmpFiles.ts';

/** A job that the server's end left running begins anew this often, then it says that it failed. */
const MOST_STARTS = 2;
/** After a failure of the jobs themselves (the database could not be written). */
const RETRY_MS = 5000;

export interface PackJobs {
  /** Something waits: begins with it unless a rendering is under way. Call it after the transaction. */
  wake(): void;
  /** Equal inputs were rendered already and their file is there: the job is done at once, past those that wait. */
  finishStored(jobId: string): void;
  /** Of the job under way; null for others. */
  progressOf(jobId: string): PackProgress | null;
  /** Waiting or running; what has ended stays as it is. */
  cancel(jobId: string): void;
  /** The file of a stored pack that is there and whole in size, else null. */
  findFile(stored: { storedPath: string; fileBytes: number }): Promise<string | null>;
  /** For tests and for the first start: nothing waits or runs any more. */
  settled(): Promise<void>;
}

/** What the thread cannot answer with is our failure. */
const problemOf: Record<PackErrorCode, ProblemCode> = {
  invalid: 'invalid',
  not_supported_yet: 'not_supported_yet',
  limit_missed: 'limit_missed',
  too_large: 'too_large',
  proof_failed: 'proof_failed',
  cancelled: 'cancelled',
  no_room: 'no_room',
  io_failed: 'internal',
};

type Failure = { code: ProblemCode; detail: string };

/** Jobs lie in a table, oldest first; one thread renders at a time. */
export function createPackJobs(deps: Deps, rendering: Rendering, { retryMs = RETRY_MS } = {}): PackJobs {
  const { store, clock, lifecycle, log, config } = deps;
  const tmpFolder = path.join(config.dataDir, 'tmp');
  mkdirSync(tmpFolder, { recursive: true });
  mkdirSync(path.join(config.dataDir, 'packs'), { recursive: true });
  let running: Promise<void> | null = null;
  let current: { jobId: string; stop: AbortController; progress: PackProgress | null } | null = null;

  function end(jobId: string, state: 'failed' | 'cancelled', { code, detail }: Failure): void {
    store.write((tx) =>
      repo.updateJob(tx, jobId, { state, problemCode: code, problemDetail: detail, endedAtMs: clock.nowMs() }),
    );
  }

  async function findFile(stored: { storedPath: string; fileBytes: number }): Promise<string | null> {
    const file = path.join(config.dataDir, stored.storedPath);
    const found = await stat(file).catch(() => null);
    return found?.isFile() && found.size === stored.fileBytes ? file : null;
  }

  /**
   * Nothing renders, and yet they are running: a killed server left them, or a database that could not be written (a full disk). Anew
   * once, since it may have been this very job that ended it.
   */
  function takeUpLeftJobs(): void {
    for (const job of repo.listRunningJobs(store.db)) {
      if (job.starts < MOST_STARTS) store.write((tx) => repo.updateJob(tx, job.id, { state: 'waiting' }));
      else end(job.id, 'failed', { code: 'internal', detail: 'It was broken off twice while it was made. Ask anew.' });
    }
  }

  interface Finished {
    storedPath: string;
    fileName: string;
    fileBytes: number;
    fileSha256: string;
    vectorSha256: string;
    manifestJson: string;
  }

  /** Row and end of the job stand together. A withdrawal in the meantime is seen here: such a pack is not made known. */
  function finish(jobId: string, from: Finished): void {
    const { storedPath, fileName, fileBytes, fileSha256, vectorSha256, manifestJson } = from;
    const made = { storedPath, fileName, fileBytes, fileSha256, vectorSha256, manifestJson };
    store.write((tx) => {
      const row = repo.findJob(tx, jobId);
      if (!row) return;
      const { job } = row;
      const nowMs = clock.nowMs();
      if (row.withdrawnReason !== null) {
        const detail = withdrawnWords(row.editionNumber, row.withdrawnReason);
        repo.updateJob(tx, jobId, {
          state: 'failed',
          problemCode: 'edition_withdrawn',
          problemDetail: detail,
          endedAtMs: nowMs,
        });
        return;
      }
      const of = {
        revisionId: job.revisionId,
        editionId: job.editionId,
        profileVersionId: job.profileVersionId,
        packKey: job.packKey,
      };
      const known = repo.findPackOf(tx, of);
      const packId = known?.id ?? deps.newId();
      if (known) repo.updateStored(tx, known.id, made);
      else {
        repo.insertPack(tx, { id: packId, ...of, ...made, madeBy: job.askedBy, madeAtMs: nowMs });
        recordAct(tx, {
          atMs: nowMs,
          personId: job.askedBy,
          act: 'pack.made',
          objectKind: 'pack',
          objectId: packId,
          objectLabel: made.fileName,
          detail: { revisionId: job.revisionId, bench: row.benchName, vectorSha256: made.vectorSha256 },
        });
      }
      repo.updateJob(tx, jobId, { state: 'done', packId, doneRatio: 1, endedAtMs: nowMs });
    });
  }

  const storedPathOf = (packKey: string) => path.join('packs', `${packKey.replace(/^sha256:/, '')}.zip`);

  function finishedOf(packKey: string, pack: MadePack): Finished {
    return {
      storedPath: storedPathOf(packKey),
      fileName: pack.fileName,
      fileBytes: pack.fileBytes,
      fileSha256: pack.fileSha256,
      vectorSha256: pack.vectorSha256,
      manifestJson: pack.manifestText,
    };
  }

  async function renderJob(row: repo.JobRow, stop: AbortController): Promise<PackResult> {
    const { job } = row;
    const profileJson = repo.readProfileJson(store.db, job.profileVersionId);
    const document = await readDocument(store.db, { id: job.revisionId, contentDigest: row.contentDigest });
    return rendering.render(
      {
        document,
        profile: JSON.parse(profileJson) as BenchProfile,
        state: row.editionNumber ?? 'draft',
        tmpFolder,
        outFile: path.join(config.dataDir, storedPathOf(job.packKey)),
      },
      (progress) => {
        if (current?.jobId === job.id) current.progress = progress;
      },
      stop.signal,
    );
  }

  async function run(jobId: string): Promise<void> {
    const stop = new AbortController();
    current = { jobId, stop, progress: null };
    try {
      const row = repo.findJob(store.db, jobId);
      if (!row) return;
      const starts = row.job.starts + 1;
      store.write((tx) => repo.updateJob(tx, jobId, { state: 'running', starts, startedAtMs: clock.nowMs() }));
      if (row.withdrawnReason !== null) {
        end(jobId, 'failed', {
          code: 'edition_withdrawn',
          detail: withdrawnWords(row.editionNumber, row.withdrawnReason),
        });
        return;
      }
      const stored = repo.findStored(store.db, row.job.packKey);
      if (stored && (await findFile(stored))) {
        finish(jobId, stored);
        return;
      }
      const result = await renderJob(row, stop);
      // A stop of the server is no one's wish to cancel: the job waits for the next start, which does not count as a failure.
      if (lifecycle.isStopping) {
        store.write((tx) => repo.updateJob(tx, jobId, { state: 'waiting', starts: starts - 1 }));
        return;
      }
      if (result.ok) finish(jobId, finishedOf(row.job.packKey, result.pack));
      else
        end(jobId, result.code === 'cancelled' ? 'cancelled' : 'failed', {
          code: problemOf[result.code],
          detail: result.message,
        });
    } catch (error) {
      log.error({ err: error, jobId }, 'a pack was not made');
      if (!lifecycle.isStopping)
        end(jobId, 'failed', { code: 'internal', detail: 'The rendering stopped unexpectedly. Nothing was kept.' });
    } finally {
      current = null;
      // Nothing renders now, so whatever lies there was left by a thread that was ended.
      await sweepWorkFolders(tmpFolder, { all: true });
    }
  }

  async function runAll(): Promise<void> {
    await sweepWorkFolders(tmpFolder, { all: true });
    takeUpLeftJobs();
    for (;;) {
      if (lifecycle.isStopping) return;
      const jobId = repo.nextWaitingJob(store.db);
      if (jobId === undefined) return;
      await run(jobId);
    }
  }

  function wake(): void {
    if (lifecycle.isStopping) return;
    running ??= runAll().then(
      () => {
        running = null;
        // One that was stored between the last look and now.
        if (!lifecycle.isStopping && repo.nextWaitingJob(store.db) !== undefined) wake();
      },
      (error: unknown) => {
        running = null;
        log.error({ err: error }, 'the pack jobs stopped');
        setTimeout(wake, retryMs).unref();
      },
    );
  }

  lifecycle.onStop(async () => {
    current?.stop.abort();
    await running;
  });
  takeUpLeftJobs();
  wake();

  return {
    wake,
    finishStored(jobId) {
      const row = repo.findJob(store.db, jobId);
      const stored = row && repo.findStored(store.db, row.job.packKey);
      if (stored && row.job.state === 'waiting') finish(jobId, stored);
      else wake();
    },
    progressOf: (jobId) => (current?.jobId === jobId ? current.progress : null),
    cancel(jobId) {
      if (current?.jobId === jobId) {
        current.stop.abort();
        return;
      }
      const row = repo.findJob(store.db, jobId);
      if (row?.job.state === 'waiting')
        end(jobId, 'cancelled', { code: 'cancelled', detail: 'Cancelled. Nothing was kept.' });
    },
    findFile,
    async settled() {
      while (running) await running;
    },
  };
}

export function withdrawnWords(editionNumber: number | null, reason: string | null): string {
  return `Edition ${editionNumber ?? ''} was withdrawn: ${reason ?? ''}`;
}
