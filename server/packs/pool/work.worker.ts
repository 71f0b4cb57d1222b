import path from 'node:path';
import { parentPort, workerData } from 'node:worker_threads';
import { loadSampleEngine } from '../../sampleEngine.ts';
import type { FromWorkThread, ToWorkThread } from './workPool.ts';
import type { WorkInput } from './workTasks.ts';
import { createWorkshop } from './workshop.ts';

/** A thread of the pool: does the tasks it is sent until it is ended. */
const port = parentPort;
if (!port) throw new Error('work.worker runs as a worker thread only.');

loadSampleEngine(path.resolve(import.meta.dirname, '..', 'public', 'wasm', 'engine.wasm')); // beside build/

const work = createWorkshop(workerData as WorkInput);

port.on('message', ({ id, task }: ToWorkThread) => {
  try {
    const result = work(task);
    const transfer = task.kind === 'words' ? [task.room] : [];
    port.postMessage({ id, result } satisfies FromWorkThread, transfer);
  } catch (thrown) {
    const { name, message, code } = thrown as Error & { code?: unknown };
    port.postMessage({ id, error: { name, message, code } } satisfies FromWorkThread);
  }
});
