import path from 'node:path';
import { parentPort, workerData } from 'node:worker_threads';
import { loadSampleEngine } from '../../sampleEngine.ts';
import type { FromWorkThread, ToWorkThread } from './workPool.ts';
import type { WorkInput, WorkResults, WorkTask } from './workTasks.ts';
import { createWorkshop } from './workshop.ts';

/** A thread of the pool: does the tasks it is sent until it is ended. */
const port = parentPort;
if (!port) throw new Error('work.worker runs as a worker thread only.');

loadSampleEngine(path.resolve(import.meta.dirname, '..', 'public', 'wasm', 'engine.wasm')); // beside build/

const work = createWorkshop(workerData as WorkInput);

/** What is handed over and not copied: nothing of it is used here again. */
function roomsOf(task: WorkTask, result: unknown): ArrayBuffer[] {
  if (task.kind === 'words') return [task.room];
  if (task.kind === 'levels') return [(result as WorkResults['levels']).sums.buffer as ArrayBuffer];
  if (task.kind !== 'frame') return [];
  const { spans, counts } = result as WorkResults['frame'];
  return [spans.buffer as ArrayBuffer, counts.buffer as ArrayBuffer];
}

port.on('message', ({ id, task }: ToWorkThread) => {
  try {
    const result = work(task);
    port.postMessage({ id, result } satisfies FromWorkThread, roomsOf(task, result));
  } catch (thrown) {
    const { name, message, code } = thrown as Error & { code?: unknown };
    port.postMessage({ id, error: { name, message, code } } satisfies FromWorkThread);
  }
});
