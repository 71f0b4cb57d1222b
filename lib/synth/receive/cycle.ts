import type { SampleEngine } from '../engine/types';
import { createSentValues } from '../synthesize/sentValues';
import { frameLayout } from '../synthesize/layout';
import { createSynthesis } from '../synthesize/synthesis';
import type { CellValues, FrameLayout } from '../synthesize/types';
import type { WaveformContent } from '../types';

/** Samples of the waveform at its base rate (M = 1) that are searched at the most; a file that repeats later is searched so far only. */
const SEARCHED_MOST = 67108864; // 2^26

/**
 * What comes back again and again: one repeat where all repeats are alike, else the whole file with its pad. Its symbols are numbered
 * 0…symbols−1, repeat by repeat.
 */
export interface Cycle {
  content: WaveformContent;
  layout: FrameLayout;
  values: CellValues;
  /** L·N ink numbers; owned by `values`. */
  cells: Uint8Array;
  /** True when a cycle is one repeat and the file has several of them. */
  isRepeat: boolean;
  symbols: number;
  /** Samples of the file (at the document's own M) from one cycle to the next. */
  periodSamples: number;
  /** Per symbol of the cycle: the first sample of its useful part, counted from the cycle's first. */
  usefulStarts: Float64Array;
  /** Subcarriers that any symbol uses: the outermost, and how many. */
  usedLow: number;
  usedHigh: number;
  usedCount: number;
  /** Least N_cp − W of all symbols, in samples of the file. */
  guardSamples: number;
}

/** Describes the cycle of a content. Throws SynthError as frameLayout and createCellValues do, `nothing_painted` is left to the caller. */
export function createCycle(content: WaveformContent): Cycle {
  const layout = frameLayout(content);
  // what a lowered peak sent is what a capture holds, reserved cells filled
  const values = createSentValues(content);
  const { repeats, repeatSamples, symbolCount, usefulSamples } = layout;
  const isAlike = values.isRepeatAlike;
  const cycleRepeats = isAlike ? 1 : repeats;
  const usefulStarts = new Float64Array(cycleRepeats * symbolCount);
  for (let i = 0; i < usefulStarts.length; i++) {
    const symbol = i % symbolCount;
    const repeat = (i - symbol) / symbolCount;
    usefulStarts[i] = repeat * repeatSamples + layout.symbolStarts[symbol]! + layout.prefixes[symbol]!;
  }
  const isNull = new Uint8Array(256).fill(1);
  content.tray.forEach((ink, place) => (isNull[place] = ink.role === 'null' ? 1 : 0));
  const isUsed = new Uint8Array(content.fftSize);
  const { cells } = values;
  for (let i = 0; i < cells.length; i++) if (isNull[cells[i]!] === 0) isUsed[i % content.fftSize] = 1;
  const half = Math.floor(content.fftSize / 2);
  let guard = usefulSamples;
  for (const prefix of layout.prefixes) guard = Math.min(guard, prefix - layout.overlapSamples);
  return {
    content,
    layout,
    values,
    cells,
    isRepeat: isAlike && repeats > 1,
    symbols: usefulStarts.length,
    periodSamples: isAlike
      ? repeatSamples + (repeats === 1 ? layout.padSamples : 0)
      : repeats * repeatSamples + layout.padSamples,
    usefulStarts,
    usedLow: isUsed.indexOf(1) - half,
    usedHigh: isUsed.lastIndexOf(1) - half,
    usedCount: isUsed.reduce((sum, used) => sum + used, 0),
    guardSamples: guard,
  };
}

/** The known waveform at the base rate, without its frequency offset, read on and on. */
export interface KnownWaveform {
  /** Samples after which it starts again. */
  readonly periodSamples: number;
  /** True when the cycle is longer than what is searched. */
  readonly isCut: boolean;
  /** The next `count` samples; after a period the first one comes again. */
  read(count: number, out: Float64Array): void;
  rewind(): void;
}

/** The cycle's samples at M = 1: a pad that is no whole number of base samples is rounded. */
export function createKnownWaveform(cycle: Cycle, engine?: SampleEngine): KnownWaveform {
  const { content, layout } = cycle;
  const { timing } = content;
  const pad = cycle.isRepeat ? 0 : Math.round(layout.padSamples / content.oversampling);
  const synthesis = createSynthesis(
    {
      ...content,
      oversampling: 1,
      frequencyOffsetHz: 0,
      timing: { ...timing, mode: 'loop', repeats: cycle.isRepeat ? 1 : timing.repeats, padSamples: pad },
    },
    { engine },
  );
  const periodSamples = Math.min(synthesis.samples, SEARCHED_MOST);
  let at = 0;
  return {
    periodSamples,
    isCut: periodSamples < synthesis.samples,
    rewind() {
      synthesis.rewind();
      at = 0;
    },
    read(count, out) {
      for (let done = 0; done < count;) {
        if (at === periodSamples) {
          synthesis.rewind();
          at = 0;
        }
        const part = Math.min(count - done, periodSamples - at);
        const got = synthesis.read(out.subarray(2 * done, 2 * (done + part)));
        done += got;
        at += got;
      }
    },
  };
}
