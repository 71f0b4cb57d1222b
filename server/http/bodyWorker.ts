import path from 'node:path';
import { Worker } from 'node:worker_threads';
import { DomainError } from '../problem.ts';
import type { CheckedBody } from './checkJson.ts';

/** What a thread may take; tests make it less. */
const LIMITS = { timeMs: 5000, memoryMb: 1024 };
const MOST_THREADS = 2;
const MOST_WAITING = 8;

export type LargeBodyCheck = (endpointName: string, bytes: Uint8Array<ArrayBuffer>) => Promise<CheckedBody>;

/** Parses and checks large bodies in threads, so that one hostile body holds up nobody else. */
export function createBodyWorker(buildDir: string, limits = LIMITS): LargeBodyCheck {
  const waiting: (() => void)[] = [];
  let running = 0;

  async function turn(): Promise<void> {
    if (running < MOST_THREADS) {
      running += 1;
      return;
    }
    if (waiting.length >= MOST_WAITING) {
      throw new DomainError('too_many', {
        detail: 'Many large documents are being saved. Try again in a moment.',
        retryAfterSec: 5,
      });
    }
    await new Promise<void>((resolve) => waiting.push(resolve)); // the place is handed over, so the count stays
  }

  function leave(): void {
    const next = waiting.shift();
    if (next) next();
    else running -= 1;
  }

  return async (endpointName, bytes) => {
    await turn();
    try {
      return await checkInThread(path.join(buildDir, 'body.worker.mjs'), { endpointName, bytes }, limits);
    } finally {
      leave();
    }
  };
}

function checkInThread(
  file: string,
  workerData: { endpointName: string; bytes: Uint8Array<ArrayBuffer> },
  limits: typeof LIMITS,
): Promise<CheckedBody> {
  return new Promise((resolve, reject) => {
    const worker = new Worker(file, {
      workerData,
      transferList: [workerData.bytes.buffer],
      resourceLimits: { maxOldGenerationSizeMb: limits.memoryMb },
    });
    const tooLong = new DomainError('too_large', `The body takes longer than ${limits.timeMs / 1000} s to check.`);
    const timer = setTimeout(() => settle(() => reject(tooLong)), limits.timeMs);
    function settle(answer: () => void): void {
      clearTimeout(timer);
      worker.removeAllListeners();
      worker.on('error', () => undefined); // a thread that is being ended may still fail
      void worker.terminate();
      answer();
    }
    worker.once('message', (checked: CheckedBody) => settle(() => resolve(checked)));
    worker.once('error', (error: Error) => {
      const isOutOfMemory = 'code' in error && error.code === 'ERR_WORKER_OUT_OF_MEMORY';
      settle(() =>
        reject(isOutOfMemory ? new DomainError('too_large', 'The body takes too much memory to check.') : error),
      );
    });
    worker.once('exit', () => settle(() => reject(new Error('The checking thread ended without an answer.'))));
  });
}
