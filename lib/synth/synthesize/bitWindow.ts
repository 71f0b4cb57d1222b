import type { BitSource } from '../sequences/bitSource';

const AHEAD_WORDS = 512;
const AHEAD_MOST = 4096; // after reading on for a while

/** A stretch of a bit source kept packed, so that small steps upwards do not ask the source each time. */
export interface BitWindow {
  /** Packed words, most significant bit first; valid after `hold`. One word more than was asked for may be read. */
  words: Uint32Array;
  /** Another number than before says that `words` changed. */
  version: number;
  /** Makes bits startBit…endBit−1 available and returns where in `words` (counted in bits) startBit lies. */
  hold(startBit: number, endBit: number): number;
}

/** A window on `source`; it grows to the largest stretch asked for. */
export function createBitWindow(source: BitSource): BitWindow {
  let first = 0;
  let held = 0;
  let ahead = AHEAD_WORDS;
  const window: BitWindow = {
    words: new Uint32Array(AHEAD_WORDS + 2),
    version: 0,
    hold(startBit, endBit) {
      const from = Math.floor(startBit / 32);
      const to = Math.floor((endBit + 31) / 32) + 1;
      if (from < first || to > first + held) {
        const isOn = from >= first && from < first + held;
        ahead = isOn ? Math.min(2 * ahead, AHEAD_MOST) : AHEAD_WORDS;
        const count = Math.max(to - from, ahead);
        let kept = 0;
        const old = window.words;
        if (window.words.length < count) window.words = new Uint32Array(count);
        if (isOn) {
          kept = first + held - from;
          if (old === window.words) old.copyWithin(0, from - first, held);
          else window.words.set(old.subarray(from - first, held));
        }
        if (kept < count) source.readWords(from + kept, count - kept, window.words, kept);
        first = from;
        held = count;
        window.version++;
      }
      return startBit - 32 * first;
    },
  };
  return window;
}
