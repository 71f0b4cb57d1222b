import path from 'node:path';
import { Worker } from 'node:worker_threads';
import { answerQuestion, type FitAnswer, type FitQuestion } from './askFit.ts';

/** Up to this a document is parsed and judged at once, in the server's own thread. */
const SMALL_TEXT = 256 * 1024;
const TOO_LONG_MS = 60_000;
const MEMORY_MB = 1024;

export type AskFit = <Q extends FitQuestion>(question: Q) => Promise<FitAnswer<Q>>;

/** Answers questions about small documents at once, about large ones in a thread, one after the other. */
export function createAskFit(buildDir: string, smallText = SMALL_TEXT): AskFit {
  let last: Promise<unknown> = Promise.resolve();
  return <Q extends FitQuestion>(question: Q): Promise<FitAnswer<Q>> => {
    if (question.documentText.length <= smallText)
      return Promise.resolve().then(() => answerQuestion(question) as FitAnswer<Q>);
    const answer = last.then(() => askThread(path.join(buildDir, 'fit.worker.mjs'), question)) as Promise<FitAnswer<Q>>;
    last = answer.catch(() => undefined);
    return answer;
  };
}

function askThread(file: string, question: FitQuestion): Promise<unknown> {
  return new Promise((resolve, reject) => {
    const worker = new Worker(file, {
      workerData: question,
      resourceLimits: { maxOldGenerationSizeMb: MEMORY_MB },
    });
    worker.unref(); // a stopping server does not wait for it
    const timer = setTimeout(() => settle(() => reject(new Error('The fit takes too long.'))), TOO_LONG_MS);
    timer.unref();
    function settle(end: () => void): void {
      clearTimeout(timer);
      worker.removeAllListeners();
      worker.on('error', () => undefined); // a thread that is being ended may still fail
      void worker.terminate();
      end();
    }
    worker.once('message', (answer: unknown) => settle(() => resolve(answer)));
    worker.once('error', (error) => settle(() => reject(error)));
    worker.once('exit', () => settle(() => reject(new Error('The fit thread ended without an answer.'))));
  });
}
