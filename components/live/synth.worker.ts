import type { LiveRequest } from '@/lib/editor/live/protocol';
import { createLiveWorker, transfersOf } from '@/lib/editor/live/worker';
import { loadEngine } from './loadEngine';

// The thread that synthesizes while somebody draws. All it does stands in lib/editor/live; here are only its ear and its voice.
interface WorkerScope {
  onmessage: ((event: { data: LiveRequest }) => void) | null;
  postMessage(message: unknown, transfer: ArrayBuffer[]): void;
}
const scope = globalThis as unknown as WorkerScope;

// A message to itself comes after all messages that wait: the worker hears the newest stroke after every symbol. A timer would be
// held back for 4 ms.
const channel = new MessageChannel();
const tasks: (() => void)[] = [];
channel.port1.onmessage = () => tasks.shift()?.();

const starting = loadEngine().then((engine) =>
  createLiveWorker({
    post: (answer) => scope.postMessage(answer, transfersOf(answer)),
    later(task) {
      tasks.push(task);
      channel.port2.postMessage(null);
    },
    engine,
  }),
);

// messages wait for the engine in their order
scope.onmessage = ({ data }) => void starting.then((worker) => worker.receive(data));
