import { setImmediate } from 'node:timers/promises';

const longestMs = 40;

/** Hands the thread back now and then, so that a cancel or a request can be heard between two blocks of pure arithmetic. */
export function createYielder(): () => Promise<void> {
  let since = performance.now();
  return async () => {
    if (performance.now() - since < longestMs) return;
    await setImmediate();
    since = performance.now();
  };
}
