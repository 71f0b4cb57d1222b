import { log10 } from '../math/exponential';
import { binOfPower, createHistogram, POWER_BINS } from './histogram';
import type { FramePower, PowerHistogram, SymbolTally } from './types';

/** Bins that one symbol keeps: 12 octaves below its own peak (36 dB); what is weaker stands in its lowest bin. */
const TALLY_BINS = 384;

/** The raised-cosine overlap around one symbol, at the rate of its useful part. */
export interface TallyOverlap {
  /** The rising ramp, V values; the falling one is 1 − r, mirrored: r[V−1−i]. */
  ramp: Float64Array;
  /** Useful part of the symbol before (interleaved; its first V samples are its suffix), null where none is near. */
  previousUseful: Float64Array | null;
}

/** An empty tally, to be kept per symbol or used again and again: a frame tally copies what it is given. */
export function createSymbolTally(): SymbolTally {
  return {
    sumHi: 0,
    sumLo: 0,
    peakPower: 0,
    peakAt: 0,
    samples: 0,
    usefulMeanPower: 0,
    usefulPeakPower: 0,
    firstBin: 0,
    counts: new Uint32Array(TALLY_BINS),
  };
}

function startBins(tally: SymbolTally): void {
  tally.firstBin = Math.max(0, binOfPower(tally.peakPower) + 1 - TALLY_BINS);
  tally.counts.fill(0);
}

/**
 * Fills `tally` from one symbol on the interpolated waveform. Two plain passes, allocates nothing; the buffers stay the caller's.
 * `useful`: x_l[0…U−1], interleaved, 2·U numbers; `prefixSamples` ≤ U at the same rate. With `overlap` the first V samples of the
 * prefix rise by the ramp and carry the falling suffix of the symbol before. A frequency offset changes no |x|² and is left out.
 */
export function tallySymbol(
  tally: SymbolTally,
  useful: Float64Array,
  prefixSamples: number,
  overlap?: TallyOverlap,
): void {
  const samples = useful.length / 2;
  const ramp = overlap?.ramp;
  const ramped = ramp ? ramp.length : 0;
  const previous = overlap?.previousUseful ?? null;
  const tail = 2 * (samples - prefixSamples);
  let high = 0;
  let low = 0;
  let peak = 0;
  let peakAt = 0;
  for (let i = 0; i < samples; i++) {
    const re = useful[2 * i]!;
    const im = useful[2 * i + 1]!;
    const power = re * re + im * im;
    const next = high + power;
    low += high >= power ? high - next + power : power - next + high;
    high = next;
    if (power > peak) {
      peak = power;
      peakAt = i;
    }
  }
  tally.usefulMeanPower = (high + low) / samples;
  tally.usefulPeakPower = peak;
  peakAt += prefixSamples;
  for (let i = 0; i < prefixSamples; i++) {
    let re = useful[tail + 2 * i]!;
    let im = useful[tail + 2 * i + 1]!;
    if (i < ramped) {
      re *= ramp![i]!;
      im *= ramp![i]!;
      if (previous) {
        const falling = ramp![ramped - 1 - i]!;
        re += falling * previous[2 * i]!;
        im += falling * previous[2 * i + 1]!;
      }
    }
    const power = re * re + im * im;
    const next = high + power;
    low += high >= power ? high - next + power : power - next + high;
    high = next;
    // the copied tail repeats a peak of the useful part: the earlier of equal ones is named
    if (power > peak || (power === peak && i < peakAt)) {
      peak = power;
      peakAt = i;
    }
  }
  tally.sumHi = high;
  tally.sumLo = low;
  tally.peakPower = peak;
  tally.peakAt = peakAt;
  tally.samples = samples + prefixSamples;
  startBins(tally);
  const { counts, firstBin } = tally;
  for (let i = 0; i < samples; i++) {
    const re = useful[2 * i]!;
    const im = useful[2 * i + 1]!;
    const bin = binOfPower(re * re + im * im) - firstBin;
    const place = bin > 0 ? bin : 0;
    counts[place] = counts[place]! + 1;
  }
  for (let i = 0; i < prefixSamples; i++) {
    let re = useful[tail + 2 * i]!;
    let im = useful[tail + 2 * i + 1]!;
    if (i < ramped) {
      re *= ramp![i]!;
      im *= ramp![i]!;
      if (previous) {
        const falling = ramp![ramped - 1 - i]!;
        re += falling * previous[2 * i]!;
        im += falling * previous[2 * i + 1]!;
      }
    }
    const bin = binOfPower(re * re + im * im) - firstBin;
    const place = bin > 0 ? bin : 0;
    counts[place] = counts[place]! + 1;
  }
}

/**
 * Fills `tally` with a suffix that falls into silence (the end of a burst, the first samples of a gap): V samples or `most`, whichever
 * is fewer. Goes to a frame tally's tail slot.
 */
export function tallyTail(tally: SymbolTally, useful: Float64Array, ramp: Float64Array, most = ramp.length): void {
  const count = Math.min(ramp.length, most);
  const powerAt = (i: number): number => {
    const falling = ramp[ramp.length - 1 - i]!;
    const re = falling * useful[2 * i]!;
    const im = falling * useful[2 * i + 1]!;
    return re * re + im * im;
  };
  tally.sumHi = 0;
  tally.sumLo = 0;
  tally.peakPower = 0;
  tally.peakAt = 0;
  for (let i = 0; i < count; i++) {
    const power = powerAt(i);
    const next = tally.sumHi + power;
    tally.sumLo += tally.sumHi >= power ? tally.sumHi - next + power : power - next + tally.sumHi;
    tally.sumHi = next;
    if (power > tally.peakPower) {
      tally.peakPower = power;
      tally.peakAt = i;
    }
  }
  tally.samples = count;
  tally.usefulMeanPower = 0;
  tally.usefulPeakPower = 0;
  startBins(tally);
  for (let i = 0; i < count; i++) {
    const place = Math.max(0, binOfPower(powerAt(i)) - tally.firstBin);
    tally.counts[place] = tally.counts[place]! + 1;
  }
}

/** The frame's figures, kept from per-symbol tallies. */
export interface FrameTally {
  /** Puts a copy of `tally` in a slot (0…slots−1, in time order), in place of what was there. O(log slots). */
  replace(slot: number, tally: SymbolTally): void;
  /** Takes a slot's tally out. */
  clear(slot: number): void;
  /** Mean, peak and PAPR over all slots; the same whatever the order of edits. */
  power(): FramePower;
  /** The counts of all slots together; owned by the tally and changed by `replace`. */
  histogram(): PowerHistogram;
  /** Per slot: PAPR of the useful part over its own mean in dB, NaN for a silent or empty slot. Owned by the tally. */
  readonly symbolPaprDb: Float64Array;
  /** Per slot: largest |x|² of the useful part. Owned by the tally. */
  readonly symbolPeakPower: Float64Array;
}

/**
 * A frame of `slots` symbols (or tails). Integers are added and subtracted, so the histogram stays exact through any number of edits;
 * powers and peaks stand in a binary tree over the slots, so that an edit renews its way to the root alone and the sums (compensated)
 * do not depend on the order of edits.
 */
export function createFrameTally(slots: number): FrameTally {
  let leaves = 1;
  while (leaves < slots) leaves *= 2;
  // node 1 is the root, node i has the children 2i and 2i + 1, slot s is node leaves + s
  const all = createSumTree(leaves);
  const active = createSumTree(leaves);
  const bestSlot = new Int32Array(2 * leaves);
  for (let slot = 0; slot < leaves; slot++) bestSlot[leaves + slot] = slot;
  for (let node = leaves - 1; node >= 1; node--) bestSlot[node] = bestSlot[2 * node]!;
  const peakPower = new Float64Array(leaves);
  const peakAt = new Float64Array(leaves);
  const firstBin = new Int32Array(slots);
  const counts: (Uint32Array | undefined)[] = new Array<Uint32Array | undefined>(slots);
  const symbolPaprDb = new Float64Array(slots).fill(NaN);
  const symbolPeakPower = new Float64Array(slots);
  const total = createHistogram();

  const move = (slot: number, times: 1 | -1): void => {
    const own = counts[slot];
    if (!own) return;
    const first = firstBin[slot]!;
    const end = Math.min(TALLY_BINS, POWER_BINS - first);
    for (let i = 0; i < end; i++) total.counts[first + i] = total.counts[first + i]! + times * own[i]!;
    total.total += times * all.samples[leaves + slot]!;
  };

  const put = (slot: number, of: SymbolTally | null): void => {
    all.put(slot, of);
    active.put(slot, of && of.usefulMeanPower > 0 ? of : null);
    peakPower[slot] = of ? of.peakPower : 0;
    peakAt[slot] = of ? of.peakAt : 0;
    symbolPeakPower[slot] = of ? of.usefulPeakPower : 0;
    symbolPaprDb[slot] = of && of.usefulMeanPower > 0 ? 10 * log10(of.usefulPeakPower / of.usefulMeanPower) : NaN;
    for (let node = (leaves + slot) >> 1; node >= 1; node >>= 1) {
      const left = bestSlot[2 * node]!;
      const right = bestSlot[2 * node + 1]!;
      bestSlot[node] = peakPower[right]! > peakPower[left]! ? right : left;
    }
  };

  return {
    symbolPaprDb,
    symbolPeakPower,
    replace(slot, tally) {
      move(slot, -1);
      const own = (counts[slot] ??= new Uint32Array(TALLY_BINS));
      own.set(tally.counts);
      firstBin[slot] = tally.firstBin;
      put(slot, tally);
      move(slot, 1);
    },
    clear(slot) {
      move(slot, -1);
      counts[slot] = undefined;
      put(slot, null);
    },
    histogram: () => total,
    power() {
      const best = bestSlot[1]!;
      return framePower({
        sum: all.high[1]! + all.low[1]!,
        samples: all.samples[1]!,
        activeSum: active.high[1]! + active.low[1]!,
        activeSamples: active.samples[1]!,
        peakPower: peakPower[best]!,
        peakSlot: best,
        peakAt: peakAt[best]!,
      });
    },
  };
}

/** Compensated sums of power, and samples, over a binary tree. */
interface SumTree {
  high: Float64Array;
  low: Float64Array;
  samples: Float64Array;
  put(slot: number, of: SymbolTally | null): void;
}

function createSumTree(leaves: number): SumTree {
  const high = new Float64Array(2 * leaves);
  const low = new Float64Array(2 * leaves);
  const samples = new Float64Array(2 * leaves);
  return {
    high,
    low,
    samples,
    put(slot, of) {
      const leaf = leaves + slot;
      high[leaf] = of ? of.sumHi : 0;
      low[leaf] = of ? of.sumLo : 0;
      samples[leaf] = of ? of.samples : 0;
      for (let node = leaf >> 1; node >= 1; node >>= 1) {
        const a = high[2 * node]!;
        const b = high[2 * node + 1]!;
        const sum = a + b;
        high[node] = sum;
        low[node] = (a >= b ? a - sum + b : b - sum + a) + low[2 * node]! + low[2 * node + 1]!;
        samples[node] = samples[2 * node]! + samples[2 * node + 1]!;
      }
    },
  };
}

/** Figures from sums: PAPR = 10 lg(peak/mean), null when nothing is painted. */
export function framePower(sums: {
  sum: number;
  samples: number;
  activeSum: number;
  activeSamples: number;
  peakPower: number;
  peakSlot: number;
  peakAt: number;
}): FramePower {
  const meanPower = sums.samples === 0 ? 0 : sums.sum / sums.samples;
  const activeMeanPower = sums.activeSamples === 0 ? 0 : sums.activeSum / sums.activeSamples;
  const over = (mean: number): number | null => (mean === 0 ? null : 10 * log10(sums.peakPower / mean));
  return {
    meanPower,
    peakPower: sums.peakPower,
    paprDb: over(meanPower),
    peakSlot: sums.peakSlot,
    peakAt: sums.peakAt,
    activeMeanPower,
    activePaprDb: over(activeMeanPower),
    samples: sums.samples,
  };
}

/**
 * Slots whose peak is 3 dB or more above the median of all that are not silent (a sequence's own start does that). `peaks`: largest
 * |x|² per symbol, 0 where silent; not changed.
 */
export function outstandingSymbols(peaks: Float64Array): number[] {
  const median = medianPeak(peaks);
  if (median === null) return [];
  const marked: number[] = [];
  peaks.forEach((peak, slot) => {
    if (peak > 0 && 10 * log10(peak / median) >= 3) marked.push(slot);
  });
  return marked;
}

/** The median of the peaks above zero (of an even number the mean of the middle two); null where there is none. */
export function medianPeak(peaks: Float64Array): number | null {
  const loud = peaks.filter((peak) => peak > 0).sort();
  if (loud.length === 0) return null;
  const middle = loud.length >> 1;
  return loud.length % 2 === 1 ? loud[middle]! : (loud[middle - 1]! + loud[middle]!) / 2;
}
