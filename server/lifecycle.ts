import type { Lifecycle } from './deps.ts';

export interface StoppableLifecycle extends Lifecycle {
  /** Runs every stop task, newest first; a second call waits for the first. */
  stop(): Promise<void>;
}

/** `onRequest` is how something inside (a vanished database) asks for the end of the whole process. */
export function createLifecycle(onRequest: (reason: string) => void): StoppableLifecycle {
  const tasks: (() => void | Promise<void>)[] = [];
  let stopping: Promise<void> | null = null;

  async function runTasks(): Promise<void> {
    for (const task of tasks.reverse()) {
      try {
        await task();
      } catch (error) {
        console.error(error); // the log may be gone already; the other tasks still run
      }
    }
  }

  return {
    get isStopping() {
      return stopping !== null;
    },
    onStop: (task) => void tasks.push(task),
    requestStop: onRequest,
    stop: () => (stopping ??= runTasks()),
  };
}
