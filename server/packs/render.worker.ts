import path from 'node:path';
import { parentPort, workerData } from 'node:worker_threads';
import { loadSampleEngine } from '../sampleEngine.ts';
import { makePack } from './makePack.ts';
import type { FromRenderWorker, RenderTask, ToRenderWorker } from './workerProtocol.ts';

/**
 * One rendering, then the thread ends: its memory goes with it. A cancel arrives between two blocks, since the pack's makers hand the
 * thread back after each of them.
 */
const port = parentPort;
if (!port) throw new Error('render.worker runs as a worker thread only.');
const send = (message: FromRenderWorker) => port.postMessage(message);

loadSampleEngine(path.resolve(import.meta.dirname, '..', 'public', 'wasm', 'engine.wasm')); // beside build/

const task = workerData as RenderTask;
const stop = new AbortController();
port.on('message', (message: ToRenderWorker) => {
  if (message.kind === 'cancel') stop.abort();
});

/** A message for each percent is enough for a bar. */
let lastShown = '';
const result = await makePack({
  document: task.document,
  profile: task.profile,
  state: task.state,
  tmpFolder: task.tmpFolder,
  outFile: () => task.outFile,
  threads: task.threads,
  signal: stop.signal,
  onProgress: (progress) => {
    const shown = `${progress.step} ${Math.floor(100 * progress.doneRatio)}`;
    if (shown === lastShown) return;
    lastShown = shown;
    send({ kind: 'progress', progress });
  },
});
send({ kind: 'result', result });
port.close();
