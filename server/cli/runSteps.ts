const PAUSE_EVERY_MS = 100;

/** Ctrl-C or TERM came while something was at work. */
export class Cancelled extends Error {}

/**
 * Runs steps until nothing is left; gives way to signals now and then. `words` say how far it is, to a person at a terminal only.
 * False: cancelled.
 */
export async function runSteps(step: () => boolean, words: () => string, signal?: AbortSignal): Promise<boolean> {
  const isShown = process.stderr.isTTY;
  let shown = Date.now();
  while (step()) {
    if (Date.now() - shown < PAUSE_EVERY_MS) continue;
    shown = Date.now();
    if (isShown) process.stderr.write(`\r\x1b[K${words()}`);
    await new Promise((next) => setImmediate(next));
    if (signal?.aborted) break;
  }
  if (isShown) process.stderr.write('\r\x1b[K');
  return !signal?.aborted;
}
