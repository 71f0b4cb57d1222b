import type { WaveformContent } from '../types';
import { createFrequencyOffset } from './frequencyOffset';
import { createRamp } from './ramp';
import { createSymbolSynthesis } from './symbolSynthesis';
import type { RenderOptions, Synthesis } from './types';

const KEEP_BYTES = 50331648; // 48 MiB

/**
 * A rendering of the whole content, read in blocks: symbols with prefixes, ramps and overlap, gaps, pad, the loop's wrap or
 * the burst's tail, the frequency offset. Memory: one symbol, and `keepBytes` (48 MiB) of useful parts that are kept for
 * the next pass (each symbol once when repeats are alike). Edits of `cells` after creation are not seen.
 * Throws SynthError as frameLayout and createCellValues do.
 * Convention: x_l[n] = (1/√N) Σ_k a(k, l) e^{+j2πkn/(N·M)}, prefix = copied tail.
 */
export function createSynthesis(content: WaveformContent, options: RenderOptions = {}): Synthesis {
  const renderer = createSymbolSynthesis(content, options);
  const { layout, values } = renderer;
  const { usefulSamples, overlapSamples, symbolCount, repeats, repeatSamples, prefixes, symbolStarts, samples } =
    layout;
  const offset = createFrequencyOffset(content, layout.oversampling);
  const ramp = createRamp(overlapSamples);
  const isAlike = repeats > 1 && values.isRepeatAlike;
  // the first useful parts are kept for a second pass or for equal repeats, as many as fit
  const keptMost = Math.floor((options.keepBytes ?? KEEP_BYTES) / (16 * usefulSamples));
  const kept: (Float64Array | undefined)[] = [];
  let scratch: Float64Array | null = null;

  /** The useful part of symbol `symbol` of `repeat`; valid until the next call. */
  function usefulPart(repeat: number, symbol: number): Float64Array {
    const slot = isAlike ? symbol : repeat * symbolCount + symbol;
    if (slot >= keptMost) {
      scratch ??= new Float64Array(2 * usefulSamples);
      renderer.useful(repeat, symbol, scratch);
      return scratch;
    }
    let part = kept[slot];
    if (part === undefined) {
      part = new Float64Array(2 * usefulSamples);
      renderer.useful(repeat, symbol, part);
      kept[slot] = part;
    }
    return part;
  }

  let position = 0;
  let repeat = 0;
  let symbol = 0; // symbolCount: behind the last symbol, in the gap or pad
  let useful: Float64Array | null = null;
  // the falling suffix that is still to be added, and the file sample where it begins
  const suffix = new Float64Array(2 * overlapSamples);
  let suffixStart = 0;
  let suffixLength = 0;

  function keepSuffix(part: Float64Array, start: number): void {
    for (let i = 0; i < overlapSamples; i++) {
      const weight = ramp[overlapSamples - 1 - i]!;
      suffix[2 * i] = part[2 * i]! * weight;
      suffix[2 * i + 1] = part[2 * i + 1]! * weight;
    }
    suffixStart = start;
    suffixLength = overlapSamples;
  }

  function rewind(): void {
    position = 0;
    repeat = 0;
    symbol = 0;
    useful = null;
    suffixLength = 0;
    if (layout.mode !== 'loop' || overlapSamples === 0) return;
    // in a loop, what the last suffix has beyond the file's end stands at its beginning
    const lastEnd = (repeats - 1) * repeatSamples + layout.frameSamples;
    if (lastEnd + overlapSamples <= samples) return;
    keepSuffix(usefulPart(repeats - 1, symbolCount - 1), lastEnd - samples);
  }

  /** Adds the pending suffix to out[2·at…], which holds `count` samples from file sample `first` on. */
  function addSuffix(out: Float64Array, at: number, count: number, first: number): void {
    const from = Math.max(first, suffixStart);
    const end = Math.min(first + count, suffixStart + suffixLength);
    for (let sample = from; sample < end; sample++) {
      const to = 2 * (at + sample - first);
      const source = 2 * (sample - suffixStart);
      out[to]! += suffix[source]!;
      out[to + 1]! += suffix[source + 1]!;
    }
  }

  /** Copies samples from…from+count−1 of the present symbol (prefix, useful part) and lets its ramp rise. */
  function copySymbol(
    part: Float64Array,
    prefix: number,
    from: number,
    count: number,
    out: Float64Array,
    at: number,
  ): void {
    let done = 0;
    if (from < prefix) {
      done = Math.min(count, prefix - from);
      const start = usefulSamples - prefix + from;
      out.set(part.subarray(2 * start, 2 * (start + done)), 2 * at);
    }
    if (done < count) {
      const start = from + done - prefix;
      out.set(part.subarray(2 * start, 2 * (start + count - done)), 2 * (at + done));
    }
    const rampEnd = Math.min(overlapSamples, from + count);
    for (let i = from; i < rampEnd; i++) {
      out[2 * (at + i - from)]! *= ramp[i]!;
      out[2 * (at + i - from) + 1]! *= ramp[i]!;
    }
  }

  function read(out: Float64Array): number {
    const wanted = Math.min(Math.floor(out.length / 2), samples - position);
    const first = position;
    let done = 0;
    while (done < wanted) {
      const repeatStart = repeat * repeatSamples;
      let count: number;
      if (symbol < symbolCount) {
        const start = repeatStart + symbolStarts[symbol]!;
        const prefix = prefixes[symbol]!;
        const end = start + prefix + usefulSamples;
        useful ??= usefulPart(repeat, symbol);
        count = Math.min(wanted - done, end - position);
        copySymbol(useful, prefix, position - start, count, out, done);
        if (suffixLength > 0) addSuffix(out, done, count, position);
        if (position + count === end) {
          if (overlapSamples > 0) keepSuffix(useful, end);
          useful = null;
          symbol++;
        }
      } else {
        const isLast = repeat === repeats - 1;
        const end = isLast ? samples : repeatStart + repeatSamples;
        count = Math.min(wanted - done, end - position);
        out.fill(0, 2 * done, 2 * (done + count));
        if (suffixLength > 0) addSuffix(out, done, count, position);
        if (position + count === end && !isLast) {
          repeat++;
          symbol = 0;
        }
      }
      position += count;
      done += count;
    }
    if (offset !== null) offset.apply(out, 0, wanted, first);
    return wanted;
  }

  rewind();
  return {
    samples,
    oversampling: layout.oversampling,
    layout,
    values,
    get position() {
      return position;
    },
    read,
    rewind,
  };
}
