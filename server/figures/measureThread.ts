import path from 'node:path';
import { Worker } from 'node:worker_threads';
import type { GridPicture } from '@/lib/drawing/gridPicture';
import type { ContentMeasures } from './measure.ts';

export interface MeasureRequest {
  /** Canonical JSON of the content, gzip, as it is stored. */
  bytes: Uint8Array;
}

export type MeasureAnswer =
  | { kind: 'picture'; picture: GridPicture }
  | { kind: 'measured'; measures: ContentMeasures }
  | { kind: 'failed'; words: string };

export interface Measuring {
  /** One at a time. Rejects where the thread fails; what it says about a content comes by `onAnswer`. */
  measure(bytes: Uint8Array, onAnswer: (answer: MeasureAnswer) => void): Promise<void>;
  stop(): Promise<void>;
}

const TOO_LONG_MS = 180_000;

/** A thread that is started when first needed, kept, and started anew after a failure. */
export function createMeasureThread(buildDir: string): Measuring {
  let worker: Worker | null = null;

  function start(): Worker {
    const started = new Worker(path.join(buildDir, 'measure.worker.mjs'), {
      resourceLimits: { maxOldGenerationSizeMb: 1024 },
    });
    started.unref(); // an idle thread keeps no process alive
    return started;
  }

  async function stop(): Promise<void> {
    const ending = worker;
    worker = null;
    await ending?.terminate();
  }

  return {
    stop,
    measure(bytes, onAnswer) {
      const thread = (worker ??= start());
      return new Promise<void>((resolve, reject) => {
        const timer = setTimeout(() => fail(new Error('Measuring takes too long.')), TOO_LONG_MS);
        timer.unref();
        const onMessage = (answer: MeasureAnswer) => {
          onAnswer(answer);
          if (answer.kind !== 'picture') leave(resolve);
        };
        const onExit = () => fail(new Error('The measuring thread ended.'));
        function leave(then: () => void): void {
          clearTimeout(timer);
          thread.off('message', onMessage).off('error', fail).off('exit', onExit);
          then();
        }
        function fail(error: Error): void {
          leave(() => reject(error));
          thread.on('error', () => undefined); // one that is being ended may still fail
          if (worker === thread) worker = null;
          void thread.terminate();
        }
        thread.on('message', onMessage).on('error', fail).on('exit', onExit);
        thread.postMessage({ bytes } satisfies MeasureRequest);
      });
    },
  };
}
