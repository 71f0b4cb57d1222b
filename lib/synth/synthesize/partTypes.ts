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

/** The engine's work on samples that lie in its memory in a row of pairs, `row` bytes from its beginning. */
export interface SampleWork {
  /** Room for some samples that were put together here, interleaved; valid until enter gives false. */
  readonly block: Float64Array;
  /** The first `count` samples of the block as a row; the block is void then. */
  rowOfBlock(count: number): number;
  /** The row of a symbol's useful part; the same as `part` gives, valid as long. */
  rowOfPart(repeat: number, symbol: number, slot: number): number;
  /** Takes a collector's levels into the engine; samples are measured into them until they are given back. */
  lend(collector: StatsCollector): void;
  measure(row: number, from: number, count: number): void;
  giveBack(collector: StatsCollector): void;
  /** Writes samples from…from+count−1 of a row as words to bytes[to…]. */
  write(writer: WordWriter, row: number, from: number, count: number, bytes: Uint8Array, to: number): void;
}

/** What parts are made of. */
export interface PartPlan {
  values: PlacedValues;
  layout: FrameLayout;
  placement: Placement;
  /** Bins that cells reach: 0…low − 1 and the last `high`. */
  low: number;
  high: number;
}
