import type { SampleEngine } from '../engine/types';
import type { WordWriter } from '../files/wordWriter';
import type { WaveformContent } from '../types';
import type { PartSums } from './levelState';

/** What every rendering function takes beside the content. */
export interface RenderOptions {
  /** Output oversampling, a multiple of the content's own (padSamples is scaled with it); the content's own by default. */
  oversampling?: number;
  /** L·N ink numbers to use instead of the content's grid (read when needed, never kept or changed). */
  cells?: Uint8Array;
  /** Most bytes of rendered symbols that a Synthesis may keep for its second pass; 48 MiB by default. Decides no bit. */
  keepBytes?: number;
  /** The engine to compute with; without one (undefined) the same bits are computed here, slower. */
  engine?: SampleEngine | undefined;
  /**
   * Gives what targets of peak reduction stand over, meanPowerBefore of the whole content: for callers that know it already. Without it
   * it is measured once, when the first symbol is rendered.
   */
  powerBefore?: (() => number) | undefined;
}

/**
 * Where everything lies, in output samples (I/Q pairs at the rendered oversampling M), all exact integers.
 * A repeat is: symbols (prefix + useful part each), then the gap. The pad stands once at the end; a burst has
 * overlapSamples more.
 */
export interface FrameLayout {
  /** Samples of the whole file. */
  samples: number;
  oversampling: number;
  repeats: number;
  symbolCount: number;
  mode: 'loop' | 'burst';
  /** From one repeat's first sample to the next one's: frame and gap. */
  repeatSamples: number;
  /** Prefixes and useful parts of one repeat, without gap. */
  frameSamples: number;
  gapSamples: number;
  padSamples: number;
  /** N·M. */
  usefulSamples: number;
  /** V = W·M: length of ramp and suffix. */
  overlapSamples: number;
  /** Per symbol: its first sample (of the prefix) counted from the repeat's first. Length L. */
  symbolStarts: Float64Array;
  /** Per symbol: samples of its prefix. Length L. */
  prefixes: Int32Array;
  /** Active samples of every repeat but the last: symbols and the last suffix (in the gap), at most repeatSamples. */
  activeSamples: number;
  /** Active samples of the last repeat: as above, cut at the file's end. */
  lastActiveSamples: number;
}

/**
 * Writes the values of one symbol's cells. Repeats count from 0, symbols from 0…L−1; any order, upwards is fastest.
 * After an edit of `cells` (the array given at creation) call `touch` with each edited symbol.
 */
export interface CellValues {
  readonly content: WaveformContent;
  /** L·N ink numbers, symbol by symbol: the array in use, to be read only. */
  readonly cells: Uint8Array;
  /**
   * The values a(k, l) of one symbol: out[2p] = re, out[2p + 1] = im, p = k + ⌊N/2⌋, 2·N numbers; 0 dB is |a|² = 1
   * on average; null and reserved cells are 0.
   */
  write(repeat: number, symbol: number, out: Float64Array): void;
  /** Payload bits that one repeat takes of stream number `stream`. */
  bitsPerRepeat(stream: number): number;
  /** Payload bits that one symbol takes of the stream. */
  bitsOfSymbol(stream: number, symbol: number): number;
  /**
   * The bits (one byte each, 0 or 1) that the stream's cells of a symbol carry, in fill order: cells upwards, first bit
   * first. Returns how many; `out` needs bitsOfSymbol(stream, symbol).
   */
  readBits(stream: number, repeat: number, symbol: number, out: Uint8Array): number;
  /** Per position p: number of the source bit that is the cell's first, −1 for a cell without payload. `out`: length N. */
  firstBits(repeat: number, symbol: number, out: Float64Array): void;
  /** True when every repeat has the same values (frequency offset aside). */
  readonly isRepeatAlike: boolean;
  /** Tells that cells of this symbol were edited: counters and running streams behind it move. */
  touch(symbol: number): void;
}

/** A rendering, read block by block in order. Equal contents give equal bits, however the blocks are cut. */
export interface Synthesis {
  readonly samples: number;
  readonly oversampling: number;
  readonly layout: FrameLayout;
  readonly values: CellValues;
  /** Samples read so far. */
  readonly position: number;
  /** Fills `out` (interleaved re, im) with the next samples; returns how many samples were written, 0 at the end. */
  read(out: Float64Array): number;
  /** As read, but at most `most` samples into a collector of levels; nothing is copied out of the engine. */
  collect(collector: Omit<StatsCollector, 'stats'>, most: number): number;
  /** As read, but at most `most` samples as words to bytes[at…], which must have room for them. */
  readWords(writer: WordWriter, most: number, bytes: Uint8Array, at?: number): number;
  /**
   * Goes to a sample, 0…samples: what is read from there has the bits that reading from the first sample gives.
   * Throws SynthError `bad_index` for another number.
   */
  seek(sample: number): void;
  /** Back to the first sample. */
  rewind(): void;
}

/** One symbol by itself: what live views and per-symbol measures need. */
export interface SymbolSynthesis {
  readonly layout: FrameLayout;
  readonly values: CellValues;
  /**
   * The useful part x_l[0…N·M−1] of a symbol, interleaved, 2·N·M numbers into `out`: no prefix, ramp or frequency
   * offset; mean power Σ|a|²/N.
   */
  useful(repeat: number, symbol: number, out: Float64Array): void;
}

/** Collects levels over samples given in order. The blocks' sizes decide no bit: partial sums end at fixed samples. */
export interface StatsCollector {
  /** Takes `count` interleaved samples from data[2·at…]. */
  add(data: Float64Array, at: number, count: number): void;
  /** The levels of all samples so far; `activeSamples` of them are in active spans (the others are zeros). */
  stats(activeSamples: number): VectorStats;
  /** The running numbers, as levelState lays them out; the engine works on a copy. */
  readonly state: Float64Array;
  /** Where given, the sums of each part are listed here as it closes and added up by somebody else. */
  readonly partSums?: PartSums;
}

/** Levels of a whole rendering; amplitudes in units of x (0 dB cell in a full symbol: RMS 1). */
export interface VectorStats {
  samples: number;
  activeSamples: number;
  /** √(mean |x|²) over the whole file, gap and pad in. */
  rms: number;
  /** √(mean |x|²) over the active spans. */
  activeRms: number;
  /** Largest |x|, and the first sample that has it. */
  samplePeak: number;
  samplePeakAt: number;
  /** Largest |I| or |Q|. */
  componentPeak: number;
  /** Mean of I and of Q over the whole file. */
  dcRe: number;
  dcIm: number;
}
