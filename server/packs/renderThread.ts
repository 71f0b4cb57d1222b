import path from 'node:path';
import { Worker } from 'node:worker_threads';
import { defaultThreadCount } from './pool/workPool.ts';
import type { PackProgress, PackResult } from './packTypes.ts';
import type { FromRenderWorker, RenderTask, ToRenderWorker } from './workerProtocol.ts';

/** A cancelled thread that does not answer within this is ended; its work folder is swept by the caller. */
const CANCEL_MS = 3000;

export interface Rendering {
  /** Rejects where the thread fails (out of memory, killed); what the pack's makers refuse is in the answer. */
  render(
    task: Omit<RenderTask, 'threads'>,
    onProgress: (progress: PackProgress) => void,
    signal: AbortSignal,
  ): Promise<PackResult>;
}

/**
 * One thread a rendering, which opens `workers` more where the rendering is long: their memory goes with them, and nothing of one pack can
 * reach the next.
 */
export function createRenderThread(buildDir: string, workers = defaultThreadCount()): Rendering {
  const threads = { file: path.join(buildDir, 'work.worker.mjs'), count: workers };
  return {
    render(given, onProgress, signal) {
      const task: RenderTask = { ...given, threads };
      return new Promise((resolve, reject) => {
        const worker = new Worker(path.join(buildDir, 'render.worker.mjs'), {
          workerData: task,
          resourceLimits: { maxOldGenerationSizeMb: 2048 },
        });
        let result: PackResult | null = null;
        let timer: NodeJS.Timeout | null = null;
        const cancel = () => {
          worker.postMessage({ kind: 'cancel' } satisfies ToRenderWorker);
          timer = setTimeout(() => void worker.terminate(), CANCEL_MS);
        };
        if (signal.aborted) cancel();
        else signal.addEventListener('abort', cancel, { once: true });
        worker.on('message', (message: FromRenderWorker) => {
          if (message.kind === 'progress') onProgress(message.progress);
          else result = message.result;
        });
        worker.once('error', reject);
        // The answer counts once the thread is gone: nothing of it writes any more.
        worker.once('exit', () => {
          signal.removeEventListener('abort', cancel);
          if (timer) clearTimeout(timer);
          if (result) resolve(result);
          else if (signal.aborted)
            resolve({ ok: false, code: 'cancelled', message: 'Cancelled. Nothing was kept.', issues: [] });
          else reject(new Error('The rendering thread ended without an answer.'));
        });
      });
    },
  };
}
