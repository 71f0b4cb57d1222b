import { demand } from '../errors';
import type { WordWriter } from '../files/wordWriter';
import { createActiveMean, type MeanMeasuring } from '../peak/meanPower';
import type { WaveformContent } from '../types';
import { createPlacedValues } from './cellValues';
import { createFrequencyOffset } from './frequencyOffset';
import { interpolationOf } from './layout';
import type { SampleWork } from './partTypes';
import { createRamp } from './ramp';
import type { RenderOptions, StatsCollector, Synthesis } from './types';
import { createUsefulParts, planParts } from './usefulParts';

const KEEP_BYTES = 50331648; // 48 MiB
const BLOCK_SAMPLES = 4096;

/**
 * A rendering of the whole content, read in blocks: symbols with prefixes, ramps and overlap, gaps, pad, the loop's wrap or
 * the burst's tail, the frequency offset. Memory: one symbol, and `keepBytes` (48 MiB) of useful parts that are kept for
 * the next pass (each symbol once when repeats are alike). Edits of `cells` after creation are not seen.
 * Throws SynthError as frameLayout and createCellValues do.
 * Convention: x_l[n] = (1/√N) Σ_k a(k, l) e^{+j2πkn/(N·M)}, prefix = copied tail.
 */
export function createSynthesis(content: WaveformContent, options: RenderOptions = {}): Synthesis {
  const plan = planParts(content, options, powerBefore(content, options));
  const { layout, values } = plan;
  const { usefulSamples, overlapSamples, symbolCount, repeats, repeatSamples, prefixes, symbolStarts, samples } =
    layout;
  const offset = createFrequencyOffset(content, layout.oversampling);
  const ramp = createRamp(overlapSamples);
  const isAlike = repeats > 1 && values.isRepeatAlike;
  // the first useful parts are kept for a second pass or for equal repeats, as many as fit
  const keptMost = Math.floor((options.keepBytes ?? KEEP_BYTES) / (16 * usefulSamples));
  const parts = createUsefulParts(plan, options, Math.min(keptMost, isAlike ? symbolCount : repeats * symbolCount));
  const { onSamples } = parts;
  // samples of which nothing is weighted or turned lie in the useful parts as they are
  const isPlain = overlapSamples === 0 && offset === null;

  function slotOf(repeat: number, symbol: number): number {
    return isAlike ? symbol : repeat * symbolCount + symbol;
  }

  /** The useful part of symbol `symbol` of `repeat`; valid until the next call. */
  function usefulPart(repeat: number, symbol: number): Float64Array {
    return parts.part(repeat, symbol, slotOf(repeat, symbol));
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

  /** The pending suffix of the symbol before (repeat, symbol), which stands at the file's end for the loop's first one. */
  function takeSuffixBefore(): void {
    suffixLength = 0;
    if (overlapSamples === 0) return;
    const isFirst = repeat === 0 && symbol === 0;
    if (isFirst && layout.mode !== 'loop') return;
    const before = symbol > 0 ? symbol - 1 : symbolCount - 1;
    const beforeRepeat = symbol > 0 ? repeat : isFirst ? repeats - 1 : repeat - 1;
    const start = beforeRepeat * repeatSamples + symbolStarts[before]! + prefixes[before]! + usefulSamples;
    // in a loop, what the last suffix has beyond the file's end stands at its beginning
    const suffixAt = isFirst ? start - samples : start;
    if (suffixAt + overlapSamples <= position) return;
    parts.enter();
    keepSuffix(usefulPart(beforeRepeat, before), suffixAt);
  }

  function seek(sample: number): void {
    demand(Number.isInteger(sample) && sample >= 0 && sample <= samples, 'bad_index', 'No such sample.');
    position = sample;
    repeat = Math.min(repeats - 1, Math.floor(sample / repeatSamples));
    const inRepeat = sample - repeat * repeatSamples;
    symbol = 0;
    if (inRepeat >= layout.frameSamples) symbol = symbolCount;
    else {
      for (let end = symbolCount; end - symbol > 1;) {
        const middle = (symbol + end) >> 1;
        if (symbolStarts[middle]! <= inRepeat) symbol = middle;
        else end = middle;
      }
    }
    useful = null;
    takeSuffixBefore();
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
    if (!parts.enter()) useful = null;
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
    if (position === samples) parts.rest();
    return wanted;
  }

  let block: Float64Array | null = null;
  // a span: samples that lie together in the engine's memory, from number spanFrom on of the row at spanRow
  let spanRow = 0;
  let spanFrom = 0;

  /** Moves on by at most `most` samples that lie together in the engine's memory, which was entered; returns how many. */
  function nextSpan(work: SampleWork, most: number): number {
    if (symbol === symbolCount && repeat < repeats - 1 && layout.gapSamples === 0) {
      repeat++;
      symbol = 0;
    }
    if (!isPlain || symbol === symbolCount) {
      const room = work.openBlock();
      const count = read(2 * most < room.length ? room.subarray(0, 2 * most) : room);
      spanRow = work.rowOfBlock(count);
      spanFrom = 0;
      return count;
    }
    spanRow = work.rowOfPart(repeat, symbol, slotOf(repeat, symbol));
    const prefix = prefixes[symbol]!;
    const from = position - repeat * repeatSamples - symbolStarts[symbol]!;
    spanFrom = from < prefix ? usefulSamples - prefix + from : from - prefix;
    const count = Math.min(most, usefulSamples - spanFrom);
    position += count;
    if (from >= prefix && spanFrom + count === usefulSamples) {
      useful = null;
      symbol++;
    }
    return count;
  }

  /** Calls `visit` with up to `most` samples, a span at a time: its row, the first sample in it, samples. */
  function eachSpan(work: SampleWork, most: number, visit: (row: number, from: number, count: number) => void): number {
    let done = 0;
    while (done < most) {
      const count = nextSpan(work, most - done);
      if (count === 0) break;
      visit(spanRow, spanFrom, count);
      done += count;
    }
    if (position === samples) parts.rest();
    return done;
  }

  // largest component of samples 0…measured − 1: words of a whole known rendering need fewer looks
  let measured = 0;
  let largest = 0;

  function collect(collector: Omit<StatsCollector, 'stats'>, most: number): number {
    if (onSamples !== null) {
      if (!parts.enter()) useful = null;
      const first = position;
      onSamples.lend(collector);
      const count = eachSpan(onSamples, most, onSamples.measure);
      onSamples.giveBack(collector);
      if (first === measured) {
        measured = position;
        largest = Math.max(largest, collector.state[12]!, collector.state[13]!);
      }
      return count;
    }
    block ??= new Float64Array(2 * BLOCK_SAMPLES);
    const count = read(most < BLOCK_SAMPLES ? block.subarray(0, 2 * most) : block);
    collector.add(block, 0, count);
    return count;
  }

  function readWords(writer: WordWriter, most: number, bytes: Uint8Array, at = 0): number {
    const size = writer.bytesPerSample;
    demand(
      bytes.length - at >= size * Math.min(most, samples - position),
      'buffer_too_small',
      'No room for the words.',
    );
    if (onSamples !== null) {
      if (!parts.enter()) useful = null;
      onSamples.beginWords(writer, bytes, at, measured === samples ? largest : Infinity);
      const written = eachSpan(onSamples, most, onSamples.write);
      onSamples.endWords();
      return written;
    }
    block ??= new Float64Array(2 * BLOCK_SAMPLES);
    let done = 0;
    while (done < most) {
      const count = read(most - done < BLOCK_SAMPLES ? block.subarray(0, 2 * (most - done)) : block);
      if (count === 0) break;
      writer.write(block, count, bytes, at + done * size);
      done += count;
    }
    return done;
  }

  seek(0);
  return {
    samples,
    oversampling: layout.oversampling,
    layout,
    values,
    get position() {
      return position;
    },
    read,
    collect,
    readWords,
    seek,
    rewind: () => seek(0),
  };
}

/**
 * Measures, a symbol at a time, the mean |x|² of the content's frame on the interpolated waveform before any peak reduction: all repeats,
 * prefixes, ramps and last suffixes in, silent symbols, gap and pad out; 0 when nothing is painted. Where all repeats have the same
 * values, the first, one between and the last are rendered.
 */
export function createMeanPowerBefore(
  content: WaveformContent,
  options: Pick<RenderOptions, 'cells' | 'engine'> = {},
): MeanMeasuring {
  const { timing } = content;
  const isShort = timing.repeats > 3 && createPlacedValues(content, options.cells, 1).isRepeatAlike;
  const before: WaveformContent = {
    ...content,
    peakReduction: { kind: 'none' },
    frequencyOffsetHz: 0, // changes no |x|²
    timing: isShort ? { ...timing, repeats: 3 } : timing,
  };
  const { cells, engine } = options;
  const synthesis = createSynthesis(before, { cells, engine, oversampling: interpolationOf(content.oversampling) });
  return createActiveMean(synthesis, isShort ? timing.repeats - 2 : 1);
}

/** The same at once. */
export function meanPowerBefore(
  content: WaveformContent,
  options: Pick<RenderOptions, 'cells' | 'engine'> = {},
): number {
  const measuring = createMeanPowerBefore(content, options);
  while (measuring.step());
  return measuring.result();
}

/** What the options say, else meanPowerBefore, measured when it is first asked. */
export function powerBefore(content: WaveformContent, options: RenderOptions): () => number {
  let measured: number | null = null;
  return options.powerBefore ?? (() => (measured ??= meanPowerBefore(content, options)));
}
