import type { WordWriter } from '../files/wordWriter';
import type { PlacedValues, Placement } from './cellValues';
import type { FrameLayout, StatsCollector } from './types';

/** Useful parts of symbols, some of them kept. */
export interface UsefulParts {
  /** To be called before the first part of each call from outside; false: views of parts given before are void. */
  enter(): boolean;
  /** Nothing more is wanted for now. */
  rest(): void;
  /**
   * The useful part of a symbol, interleaved, to be read only; valid until the next call (`slot` below the kept ones: until
   * enter gives false). Equal slots are equal parts; slot −1 keeps nothing.
   */
  part(repeat: number, symbol: number, slot: number): Float64Array;
  /** What the engine does with samples in its memory; null without an engine. */
  readonly onSamples: SampleWork | null;
}

/**
 * The engine's work on samples that lie in its memory in a row of pairs, `row` bytes from its beginning. To be used after `enter`, and
 * only until something else may have entered.
 */
export interface SampleWork {
  /** Room for samples that are put together outside, interleaved. */
  openBlock(): Float64Array;
  /** The first `count` samples of the block as a row; the block is void then. */
  rowOfBlock(count: number): number;
  /** The row of a symbol's useful part: what `part` gives. */
  rowOfPart(repeat: number, symbol: number, slot: number): number;
  /** Takes a collector's levels into the engine; samples are measured into them until they are given back. */
  lend(collector: Omit<StatsCollector, 'stats'>): void;
  /** Measures samples from…from+count−1 of a row. */
  measure(row: number, from: number, count: number): void;
  giveBack(collector: Omit<StatsCollector, 'stats'>): void;
  /**
   * From here on samples are written as words to bytes[at…]; all of them are there after endWords. No component is beyond ±`most`
   * (Infinity where that is not known).
   */
  beginWords(writer: WordWriter, bytes: Uint8Array, at: number, most: number): void;
  /** Writes samples from…from+count−1 of a row. */
  write(row: number, from: number, count: number): void;
  endWords(): void;
}

/** What parts are made of. */
export interface PartPlan {
  values: PlacedValues;
  layout: FrameLayout;
  placement: Placement;
  /** Bins that cells reach: 0…low − 1 and the last `high`. */
  low: number;
  high: number;
  /** To be called before each enter, where not null. */
  prepare: (() => void) | null;
}
