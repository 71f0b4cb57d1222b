import { patchBytes } from './patch';
import type { Patch } from './types';

/** Steps kept for undo and redo, bounded by bytes so that small strokes go back far and large ones never fill the memory. */
export interface History {
  /** Remembers a done patch; what was undone before is gone. Returns how many older steps had to be let go for it. */
  push(patch: Patch): number;
  /** The patch to take back next, moved over to redo; the caller applies its inverse. */
  takeUndo(): Patch | null;
  /** The patch to do again next, moved back to undo; the caller applies it. */
  takeRedo(): Patch | null;
  nextUndo(): Patch | null;
  nextRedo(): Patch | null;
  bytes(): number;
}

export const HISTORY_BYTES_MOST = 64 * 1024 * 1024;

export function createHistory(bytesMost: number = HISTORY_BYTES_MOST): History {
  const past: { patch: Patch; bytes: number }[] = [];
  let future: { patch: Patch; bytes: number }[] = [];
  let bytes = 0;
  return {
    push(patch) {
      for (const step of future) bytes -= step.bytes;
      future = [];
      const size = patchBytes(patch);
      past.push({ patch, bytes: size });
      bytes += size;
      let letGo = 0;
      // The newest step stays even when it alone is over the bound: one stroke can always be taken back.
      while (bytes > bytesMost && past.length > 1) {
        bytes -= past.shift()!.bytes;
        letGo++;
      }
      return letGo;
    },
    takeUndo() {
      const step = past.pop();
      if (step) future.push(step);
      return step?.patch ?? null;
    },
    takeRedo() {
      const step = future.pop();
      if (step) past.push(step);
      return step?.patch ?? null;
    },
    nextUndo: () => past[past.length - 1]?.patch ?? null,
    nextRedo: () => future[future.length - 1]?.patch ?? null,
    bytes: () => bytes,
  };
}
