import { createTransform } from '../fft/transform';
import { createFrequencyOffset } from '../synthesize/frequencyOffset';
import { frameLayout } from '../synthesize/layout';
import type { WaveformContent } from '../types';

/** What is called for each symbol found: `values` (2·N, position p = k + ⌊N/2⌋) is only lent until it returns. */
export type FoundSymbol = (repeat: number, symbol: number, values: Float64Array) => void;

/** Turns samples of a file, fed in order from its first, into cells. */
export interface Demodulator {
  /** The next `count` samples (interleaved; the whole array by default), normalised so that a 0 dB cell has |a|² = 1. Not kept. */
  push(samples: Float64Array, count?: number): void;
  /**
   * The next sample pushed is the file's sample `first`: symbols whose useful part begins there or later are found. Any place; what was
   * pushed of a symbol that is not whole is forgotten.
   */
  seek(first: number): void;
  /** Symbols found so far, all repeats counted. */
  readonly symbolsFound: number;
}

/**
 * Demodulation with known timing: the transform begins at each symbol's useful part, where prefix, ramps and the suffix of the symbol
 * before have ended. The document's frequency offset is turned back first. a(k, l) = (1/(M·√N)) Σ x[n] e^{−j2πkn/(N·M)}.
 * `oversampling` is the file's (the document's own by default); memory: one symbol.
 * Throws SynthError as frameLayout does.
 */
export function createDemodulator(
  content: WaveformContent,
  found: FoundSymbol,
  oversampling = content.oversampling,
): Demodulator {
  const layout = frameLayout(content, oversampling);
  const { usefulSamples, symbolCount } = layout;
  const size = content.fftSize;
  const half = Math.floor(size / 2);
  const transform = createTransform(usefulSamples);
  const back = createFrequencyOffset({ ...content, frequencyOffsetHz: -content.frequencyOffsetHz }, oversampling);
  const useful = new Float64Array(2 * usefulSamples);
  const bins = new Float64Array(2 * usefulSamples);
  const values = new Float64Array(2 * size);
  const scale = 1 / (oversampling * Math.sqrt(size));
  let position = 0;
  let repeat = 0;
  let symbol = 0;
  let symbolsFound = 0;
  let start = layout.prefixes[0]!;

  function emit(): void {
    if (back) back.apply(useful, 0, usefulSamples, start);
    transform.forward(useful, bins);
    for (let p = 0; p < size; p++) {
      const k = p - half;
      const bin = k < 0 ? k + usefulSamples : k;
      values[2 * p] = bins[2 * bin]! * scale;
      values[2 * p + 1] = bins[2 * bin + 1]! * scale;
    }
    found(repeat, symbol, values);
    symbolsFound++;
    next();
    start = startOf();
  }

  function next(): void {
    symbol++;
    if (symbol === symbolCount) {
      symbol = 0;
      repeat++;
    }
  }

  const startOf = (): number => repeat * layout.repeatSamples + layout.symbolStarts[symbol]! + layout.prefixes[symbol]!;

  return {
    seek(first) {
      position = first;
      repeat = Math.min(layout.repeats - 1, Math.floor(first / layout.repeatSamples));
      symbol = 0;
      while (repeat < layout.repeats && (start = startOf()) < first) next();
    },
    get symbolsFound() {
      return symbolsFound;
    },
    push(samples, count = samples.length / 2) {
      let at = 0;
      while (at < count && repeat < layout.repeats) {
        if (position < start) {
          const skip = Math.min(count - at, start - position);
          at += skip;
          position += skip;
          continue;
        }
        const filled = position - start;
        const take = Math.min(count - at, usefulSamples - filled);
        useful.set(samples.subarray(2 * at, 2 * (at + take)), 2 * filled);
        at += take;
        position += take;
        if (filled + take === usefulSamples) emit();
      }
    },
  };
}
