import { createMixedRadix } from '../fft/mixedRadix';
import type { WordWriter } from '../files/wordWriter';
import type { WaveformContent } from '../types';
import { createPlacedValues, type Placement, type PlacedValues } from './cellValues';
import { frameLayout } from './layout';
import { isEngineSize } from '../engine/transformPlan';
import { createEngineParts } from './engineParts';
import type { FrameLayout, RenderOptions, StatsCollector } from './types';

/** Useful parts of symbols, some of them kept. */
export interface UsefulParts {
  /** To be called before the first part of each call from outside; false: views of parts given before are void. */
  enter(): boolean;
  /** Nothing more is wanted for now. */
  rest(): void;
  /**
   * The useful part of a symbol, interleaved, to be read only; valid until the next call (`slot` below the kept ones: until
   * enter gives false). Equal slots are equal parts.
   */
  part(repeat: number, symbol: number, slot: number): Float64Array;
  /** What the engine does with samples in its memory; null without an engine. */
  readonly onSamples: SampleWork | null;
}

/** The engine's work on samples that lie in its memory, `at` bytes from its beginning. */
export interface SampleWork {
  /** Room for some samples that were put together here; valid until enter gives false. */
  readonly block: Float64Array;
  measure(collector: StatsCollector, at: number, count: number): void;
  /** Writes `count` samples as words to bytes[to…]. */
  write(writer: WordWriter, at: number, count: number, bytes: Uint8Array, to: number): void;
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

/** Throws SynthError as frameLayout and createCellValues do. */
export function planParts(content: WaveformContent, options: RenderOptions): PartPlan {
  const layout = frameLayout(content, options.oversampling);
  const { fftSize } = content;
  const values = createPlacedValues(content, options.cells, 1 / Math.sqrt(fftSize));
  const half = Math.floor(fftSize / 2);
  // k < 0 at bin size + k, k ≥ 0 at bin k
  const placement: Placement = { split: half, low: layout.usefulSamples - half, high: -half };
  const { first, end } = values.painted;
  return { values, layout, placement, low: Math.max(0, end - half), high: Math.max(0, half - first) };
}

/** Parts by the engine where there is one that knows the size, else by the same operations here. */
export function createUsefulParts(plan: PartPlan, options: RenderOptions, slots: number): UsefulParts {
  const { engine } = options;
  if (engine !== undefined && isEngineSize(plan.layout.usefulSamples)) return createEngineParts(plan, engine, slots);
  return createPlainParts(plan, slots);
}

function createPlainParts({ values, layout, placement, low, high }: PartPlan, slots: number): UsefulParts {
  const size = layout.usefulSamples;
  const inverse = createMixedRadix(size, 'inverse');
  const spectrum = new Float64Array(2 * size);
  const kept: (Float64Array | undefined)[] = [];
  let scratch: Float64Array | null = null;
  return {
    onSamples: null,
    enter: () => true,
    rest: () => undefined,
    part(repeat, symbol, slot) {
      const known = kept[slot];
      if (known !== undefined) return known;
      const part = slot < slots ? new Float64Array(2 * size) : (scratch ??= new Float64Array(2 * size));
      spectrum.fill(0, 0, 2 * low);
      spectrum.fill(0, 2 * (size - high));
      values.writePlaced(repeat, symbol, spectrum, placement);
      inverse(spectrum, part);
      if (slot < slots) kept[slot] = part;
      return part;
    },
  };
}
