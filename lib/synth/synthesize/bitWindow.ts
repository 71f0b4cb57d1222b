import type { BitSource, WordRecurrence } from '../sequences/bitSource';

const AHEAD_WORDS = 512;
const AHEAD_MOST = 4096; // after reading on for a while

/** A stretch of a bit source kept packed, so that small steps upwards do not ask the source each time. */
export interface BitWindow {
  /** Packed words, most significant bit first; valid after `hold`. One word more than was asked for may be read. */
  words: Uint32Array;
  /** Another number than before says that `words` changed. */
  version: number;
  /** Bits that may be asked for without a change of `words`: those before this one of them. */
  readonly heldBits: number;
  /** Makes bits startBit…endBit−1 available and returns where in `words` (counted in bits) startBit lies. */
  hold(startBit: number, endBit: number): number;
}

/** Words at…end−1 from those before them. */
function runOn(words: Uint32Array, { taps, inverted }: WordRecurrence, at: number, end: number): void {
  const mask = inverted ? 0xffffffff : 0;
  if (taps.length === 2) {
    const near = taps[0]!;
    const far = taps[1]!;
    for (let i = at; i < end; i++) words[i] = words[i - near]! ^ words[i - far]! ^ mask;
    return;
  }
  for (let i = at; i < end; i++) {
    let word = mask;
    for (let t = 0; t < taps.length; t++) word ^= words[i - taps[t]!]!;
    words[i] = word;
  }
}

/** A window on `source`; it grows to the largest stretch asked for. */
export function createBitWindow(source: BitSource): BitWindow {
  const { recurrence } = source;
  const reach = recurrence?.taps.at(-1) ?? 0; // words before that a word follows from
  let first = 0;
  let held = 0;
  let ahead = AHEAD_WORDS;

  /** Moves the window on to words from…to−1 and further, keeping what it holds of them. */
  function moveOn(from: number, to: number): void {
    const start = Math.min(from, Math.max(first, first + held - reach));
    ahead = Math.min(2 * ahead, AHEAD_MOST);
    const count = Math.max(to - start, ahead);
    const kept = first + held - start;
    const old = window.words;
    if (old.length < count) {
      window.words = new Uint32Array(count);
      window.words.set(old.subarray(start - first, held));
    } else old.copyWithin(0, start - first, held);
    if (recurrence !== null && kept >= reach) runOn(window.words, recurrence, kept, count);
    else source.readWords(start + kept, count - kept, window.words, kept);
    first = start;
    held = count;
  }

  function moveTo(from: number, to: number): void {
    ahead = AHEAD_WORDS;
    const count = Math.max(to - from, ahead);
    if (window.words.length < count) window.words = new Uint32Array(count);
    source.readWords(from, count, window.words, 0);
    first = from;
    held = count;
  }

  const window: BitWindow = {
    words: new Uint32Array(AHEAD_WORDS + 2),
    version: 0,
    get heldBits() {
      return 32 * (held - 1);
    },
    hold(startBit, endBit) {
      const from = Math.floor(startBit / 32);
      const to = Math.floor((endBit + 31) / 32) + 1;
      if (from < first || to > first + held) {
        if (from >= first && from < first + held) moveOn(from, to);
        else moveTo(from, to);
        window.version++;
      }
      return startBit - 32 * first;
    },
  };
  return window;
}
