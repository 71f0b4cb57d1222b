import type { EngineExports } from '../engine/types';
import { LEVEL_STATE_LENGTH } from './levelState';
import type { PartPlan } from './partTypes';

export const BLOCK_SAMPLES = 4096;
/** Words that are gathered before they are copied out. */
export const STAGED_SAMPLES = 8192;
export const RUNS_MOST = 512;
export const RUN_NUMBERS = 9;
const LEAST_WINDOW_WORDS = 4130;
const MOST_BITS = 12; // of a cell, or from an anchored cell to the next
const SPARE = 64; // what the kernel may read or write beyond an end
// A transform walks several rows that lie whole multiples of 4096 bytes apart, which a cache holds in the same few places: what it
// reads and what it writes begin at different remainders, or each pass throws its own lines out (three times slower was seen).
const CACHE_WAY = 4096;

/** Where everything lies in a room, in bytes from its beginning. The first three depend on the transform's size alone. */
export interface RoomMap {
  plan: number;
  scratch: number;
  other: number;
  spectrum: number;
  part: number;
  flat: number;
  runs: number;
  windows: number[];
  points: number[];
  state: number;
  counts: number;
  block: number;
  words: number;
  kept: number;
  bytes: number;
}

/** A room as its tenant sees it; all changes with each tenancy. */
export interface OpenRoom {
  kernel: EngineExports;
  /** Its first byte. */
  start: number;
  /** The whole memory. */
  memory: ArrayBuffer;
  numbers: Float64Array;
  integers: Int32Array;
  /** Samples that were put together outside, interleaved: 2·BLOCK_SAMPLES numbers. */
  block: Float64Array;
  /** Words that wait to be copied out. */
  staged: Uint8Array;
}

export function mapRoom({ values, layout }: PartPlan, planBytes: number, slots: number): RoomMap {
  const size = layout.usefulSamples;
  const { content, inks } = values;
  let end = 0;
  const take = (bytes: number): number => {
    const at = end;
    end += Math.ceil((bytes + SPARE) / 64) * 64;
    return at;
  };
  const takeApart = (bytes: number, remainder: number): number => {
    end = Math.ceil(end / CACHE_WAY) * CACHE_WAY + remainder;
    return take(bytes);
  };
  const windowWords = Math.max(LEAST_WINDOW_WORDS, Math.ceil((MOST_BITS * content.fftSize) / 32) + 36);
  const map = {
    plan: take(planBytes),
    scratch: takeApart(16 * size, 0),
    other: takeApart(16 * size, 1024),
    spectrum: takeApart(16 * size, 1024),
    part: takeApart(16 * size, 2048),
    flat: take(16 * size),
    runs: take(4 * RUN_NUMBERS * RUNS_MOST),
    windows: content.streams.map(() => take(4 * windowWords)),
    points: inks.map((plan) => (plan.kind === 'data' ? take(8 * plan.points.length) : 0)),
    state: take(8 * LEVEL_STATE_LENGTH),
    counts: take(16),
    block: take(16 * BLOCK_SAMPLES),
    words: take(8 * STAGED_SAMPLES),
    kept: takeApart(16 * size * slots + 4096, 2048),
  };
  return { ...map, bytes: end };
}
