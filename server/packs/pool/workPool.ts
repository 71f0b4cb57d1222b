import { availableParallelism } from 'node:os';
import { setImmediate } from 'node:timers/promises';
import { Worker } from 'node:worker_threads';
import {
  frameLayout,
  interpolationOf,
  SynthError,
  type BenchContent,
  type SynthErrorCode,
  type WaveformContent,
} from '@/lib/synth';
import type { TaskOf, WorkInput, WorkResults, WorkTask } from './workTasks.ts';
import { createWorkshop } from './workshop.ts';

/** Threads to render with: the bundle that runs in each, and how many. */
export interface WorkThreads {
  file: string;
  count: number;
  /** From how many samples on (interpolated) threads are opened; by default from where that takes less time than it saves. */
  leastSamples?: number;
}

const LEAST_SAMPLES = 1 << 21;
const KEEP_BYTES = 16 * 2 ** 20;

/** All cores but the one that puts the pack together. */
export const defaultThreadCount = (): number => Math.max(1, availableParallelism() - 1);

/** Does tasks of one pack. Rejects where a task fails, or where the thread that has it ends. */
export interface WorkPool {
  /** Tasks that are worth having under way at once. */
  readonly size: number;
  /** What a document whose peak is reduced needs first, measured once for all threads. */
  begin(): Promise<void>;
  /** `transfer` is handed over and no longer the caller's. */
  run<Kind extends WorkTask['kind']>(task: TaskOf<Kind>, transfer?: ArrayBuffer[]): Promise<WorkResults[Kind]>;
  /** As run, for long tasks that shall not stand before others: one after another in a thread beside the pool. */
  runAside<Kind extends WorkTask['kind']>(task: TaskOf<Kind>): Promise<WorkResults[Kind]>;
  /** Ends the threads; what is under way rejects. */
  close(): Promise<void>;
}

export type ToWorkThread = { id: number; task: WorkTask };
export type FromWorkThread = { id: number; result: WorkResults[WorkTask['kind']] } | { id: number; error: WorkFailure };

/** An error on its way between threads: of the class only the name arrives. */
export interface WorkFailure {
  name: string;
  message: string;
  code?: unknown;
}

const endedMessage = 'A thread of the rendering ended unexpectedly.';

function errorOf({ name, message, code }: WorkFailure): Error {
  if (name === 'SynthError') return new SynthError(code as SynthErrorCode, message);
  return Object.assign(new Error(message), { name, ...(code === undefined ? {} : { code }) });
}

interface Waiting {
  resolve: (result: never) => void;
  reject: (error: Error) => void;
}

/** One thread and the tasks it has; answers come in the order of the tasks. */
function openThread(file: string, input: WorkInput) {
  const worker = new Worker(file, { workerData: input, resourceLimits: { maxOldGenerationSizeMb: 2048 } });
  const waiting = new Map<number, Waiting>();
  let failure: Error | null = null;
  let lastId = 0;
  const fail = (error: Error) => {
    failure ??= error;
    for (const { reject } of waiting.values()) reject(failure);
    waiting.clear();
  };
  worker.on('message', (message: FromWorkThread) => {
    const one = waiting.get(message.id);
    waiting.delete(message.id);
    if ('error' in message) one?.reject(errorOf(message.error));
    else one?.resolve(message.result as never);
  });
  worker.on('error', (cause) => fail(new Error(endedMessage, { cause })));
  worker.on('exit', () => fail(new Error(endedMessage)));
  return {
    get busy() {
      return waiting.size;
    },
    run<Kind extends WorkTask['kind']>(task: TaskOf<Kind>, transfer: ArrayBuffer[] = []): Promise<WorkResults[Kind]> {
      if (failure) return Promise.reject(failure);
      const id = ++lastId;
      return new Promise((resolve, reject) => {
        waiting.set(id, { resolve, reject });
        worker.postMessage({ id, task } satisfies ToWorkThread, transfer);
      });
    },
    async close() {
      fail(new Error('The rendering was given up.'));
      await worker.terminate();
    },
  };
}

/** A pool of threads; one more for what runs beside. Threads open with the first task they get. */
function openThreadPool({ file, count }: WorkThreads, input: WorkInput): WorkPool {
  type Thread = ReturnType<typeof openThread>;
  const threads: Thread[] = [];
  let beside: Thread | null = null;
  function idlest(): Thread {
    const free = threads.find(({ busy }) => busy === 0);
    if (free) return free;
    if (threads.length < count) {
      threads.push(openThread(file, input));
      return threads.at(-1)!;
    }
    return threads.reduce((best, one) => (one.busy < best.busy ? one : best));
  }
  return {
    size: count,
    async begin() {
      if (input.content.peakReduction.kind === 'none') return;
      input = { ...input, powerBefore: await idlest().run<'power'>({ kind: 'power' }) }; // threads opened from now on
    },
    run: (task, transfer) => idlest().run(task, transfer),
    runAside: (task) => (beside ??= openThread(file, input)).run(task),
    close: async () => void (await Promise.all([...threads, ...(beside ? [beside] : [])].map((one) => one.close()))),
  };
}

/** The same work in this very thread, which is handed back after each task: what a small pack needs no threads for. */
function openOwnPool(input: WorkInput): WorkPool {
  const work = createWorkshop(input);
  const run = async <Kind extends WorkTask['kind']>(task: TaskOf<Kind>): Promise<WorkResults[Kind]> => {
    const result = work(task);
    await setImmediate();
    return result;
  };
  return { size: 1, begin: () => Promise.resolve(), run, runAside: run, close: () => Promise.resolve() };
}

/** The pool for a pack: threads where they are given and worth it. */
export function openPool(content: WaveformContent, bench: BenchContent, threads?: WorkThreads): WorkPool {
  const { samples } = frameLayout(content, interpolationOf(content.oversampling));
  const keepBytes = Math.floor(KEEP_BYTES / (threads?.count ?? 1));
  const input = { content, bench, keepBytes, powerBefore: null };
  if (threads === undefined || samples < (threads.leastSamples ?? LEAST_SAMPLES)) return openOwnPool(input);
  return openThreadPool(threads, input);
}

/**
 * Does the tasks, as many at once as keep the pool at work, and takes the results one after another in the tasks' order. The tasks are
 * made when they are due, so that as much memory is in use as is under way.
 */
export async function inOrder<Kind extends WorkTask['kind']>(
  pool: WorkPool,
  tasks: Iterable<{ task: TaskOf<Kind>; transfer?: ArrayBuffer[] }>,
  take: (result: WorkResults[Kind], task: TaskOf<Kind>) => void | Promise<void>,
): Promise<void> {
  const most = pool.size + 1;
  const under: { task: TaskOf<Kind>; result: Promise<WorkResults[Kind]> }[] = [];
  const next = async () => {
    const { task, result } = under.shift()!;
    await take(await result, task);
  };
  try {
    for (const { task, transfer } of tasks) {
      const result = pool.run(task, transfer);
      result.catch(() => undefined); // its turn comes later
      under.push({ task, result });
      if (under.length > most) await next();
    }
    while (under.length > 0) await next();
  } finally {
    await Promise.allSettled(under.map(({ result }) => result));
  }
}
