import { createRamp, createSentValues, createSymbolSynthesis, interpolationOf } from '@/lib/synth/index';
import type { CellValues, SampleEngine, WaveformContent } from '@/lib/synth/index';

/** Useful parts kept: the symbols round the one being drawn stay at hand. */
const KEPT = 6;

/** Symbols of the first repeat on the interpolated waveform, a few of them kept. */
export interface Waveform {
  /** The cells' values a(k, l) as they are meant. */
  readonly values: CellValues;
  /** M′. */
  readonly interpolation: number;
  /** Output samples (M) of a symbol's prefix, and of its useful part. */
  prefixOf(symbol: number): number;
  readonly usefulSamples: number;
  readonly overlapSamples: number;
  /** The symbol whose suffix falls into this one's prefix; null where silence is before it. */
  previousOf(symbol: number): number | null;
  nextOf(symbol: number): number | null;
  /** Samples of silence that the last suffix falls into, at M′; 0 where it falls into a symbol or is not there. */
  readonly tailSamples: number;
  /** Rising ramp at M′. */
  readonly ramp: Float64Array;
  /** x_l[0…N·M′−1], interleaved. Valid until KEPT other symbols were asked for; read only. */
  useful(symbol: number): Float64Array;
  /** Tells that cells of the symbol were edited: counts behind it move. */
  touch(symbol: number): void;
  /** Tells that the symbol's values moved. */
  forget(symbol: number): void;
  /** Writes `count` rendered samples (M) from a symbol's first sample on, ramps and the next symbol's beginning included. */
  write(symbol: number, count: number, out: Float64Array): void;
  /** Symbols synthesized so far. */
  synthesized(): number;
}

/** `powerBefore`: what targets of peak reduction stand over; what it gives may change where all symbols are forgotten. */
export function createWaveform(
  content: WaveformContent,
  cells: Uint8Array,
  engine?: SampleEngine,
  powerBefore: () => number = () => 0,
): Waveform {
  const interpolation = interpolationOf(content.oversampling);
  const synthesis = createSymbolSynthesis(content, { cells, oversampling: interpolation, engine, powerBefore });
  const { layout } = synthesis;
  const values = createSentValues(content, { cells, powerBefore });
  const { symbolCount, oversampling, timing } = content;
  const step = interpolation / oversampling;
  const usefulSamples = content.fftSize * oversampling;
  const overlapSamples = content.overlapSamples * oversampling;
  const ramp = createRamp(layout.overlapSamples);
  const outputRamp = createRamp(overlapSamples);
  const kept = new Map<number, Float64Array>();
  let made = 0;

  // The end of the frame meets its beginning where the file loops without silence, or repeats without a gap.
  const isClosed =
    timing.gapSamples === 0 && (timing.repeats > 1 || (timing.mode === 'loop' && timing.padSamples === 0));
  const silence =
    timing.gapSamples * interpolation +
    (timing.repeats === 1 ? timing.padSamples * step + (timing.mode === 'burst' ? layout.overlapSamples : 0) : 0);

  const previousOf = (symbol: number) => (symbol > 0 ? symbol - 1 : isClosed ? symbolCount - 1 : null);
  const nextOf = (symbol: number) => (symbol < symbolCount - 1 ? symbol + 1 : isClosed ? 0 : null);

  function useful(symbol: number): Float64Array {
    let buffer = kept.get(symbol);
    if (buffer) {
      kept.delete(symbol);
      kept.set(symbol, buffer);
      return buffer;
    }
    if (kept.size >= KEPT) {
      const oldest = kept.keys().next().value!;
      buffer = kept.get(oldest)!;
      kept.delete(oldest);
    } else buffer = new Float64Array(2 * layout.usefulSamples);
    synthesis.useful(0, symbol, buffer);
    made++;
    kept.set(symbol, buffer);
    return buffer;
  }

  /** Adds `count` samples of a symbol from its prefix' first on to out[2·at…]; the falling suffix of `previous` with them. */
  function writeSymbol(symbol: number, previous: number | null, count: number, out: Float64Array, at: number): void {
    const own = useful(symbol);
    const prefix = layout.prefixes[symbol]! / step;
    for (let i = 0; i < count; i++) {
      const from = 2 * step * (i < prefix ? usefulSamples - prefix + i : i - prefix);
      const gain = i < overlapSamples ? outputRamp[i]! : 1;
      out[2 * (at + i)] = gain * own[from]!;
      out[2 * (at + i) + 1] = gain * own[from + 1]!;
    }
    if (previous !== null) addSuffix(previous, Math.min(count, overlapSamples), out, at);
  }

  function addSuffix(symbol: number, count: number, out: Float64Array, at: number): void {
    if (count <= 0) return;
    const before = useful(symbol);
    for (let i = 0; i < count; i++) {
      const gain = outputRamp[overlapSamples - 1 - i]!;
      out[2 * (at + i)]! += gain * before[2 * step * i]!;
      out[2 * (at + i) + 1]! += gain * before[2 * step * i + 1]!;
    }
  }

  return {
    values,
    interpolation,
    prefixOf: (symbol) => layout.prefixes[symbol]! / step,
    usefulSamples,
    overlapSamples,
    previousOf,
    nextOf,
    tailSamples: isClosed ? 0 : Math.min(silence, layout.overlapSamples),
    ramp,
    useful,
    touch(symbol) {
      values.touch(symbol);
      synthesis.values.touch(symbol);
    },
    forget: (symbol) => void kept.delete(symbol),
    write(symbol, count, out) {
      const length = layout.prefixes[symbol]! / step + usefulSamples;
      const own = Math.min(count, length);
      writeSymbol(symbol, previousOf(symbol), own, out, 0);
      if (count <= length) return;
      const next = nextOf(symbol);
      out.fill(0, 2 * length, 2 * count);
      if (next === null) addSuffix(symbol, Math.min(count - length, overlapSamples), out, length);
      else writeSymbol(next, symbol, Math.min(count - length, usefulSamples), out, length);
    },
    synthesized: () => made,
  };
}
