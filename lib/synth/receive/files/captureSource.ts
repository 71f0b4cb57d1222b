import type { SampleSource } from '../../measure/reconstructedPeak';
import { createWordReader } from '../../files/wordReader';
import { fullScaleOf } from '../../quantize/wordScale';
import type { BenchContent } from '../../types';
import type { ByteSource, CaptureLayout } from './captureLayout';
import { csvSource, indexCsv } from './csvCapture';

/** One way to read the same bytes, with its name for people: "" for the layout as given. */
export interface CaptureReading {
  words: string;
  source: SampleSource;
}

export type ReadingsOutcome = { ok: true; readings: CaptureReading[] } | { ok: false; message: string };

const BLOCK_SAMPLES = 65536;

/**
 * The readings of a capture: its layout as given, then with the bytes of a word swapped, then with the other number format; the two files of
 * a split capture are I's and Q's. Nothing is held in memory but a block. A generator: text has to be indexed first.
 */
export function* captureReadings(
  sources: readonly ByteSource[],
  layout: CaptureLayout,
): Generator<number, ReadingsOutcome> {
  const [first, second] = sources;
  const isSplit = layout.layout === 'split';
  if (first === undefined || (isSplit && second === undefined))
    return { ok: false, message: 'I and Q in two files: choose both.' };
  if (layout.container === 'csv') {
    const indexed = yield* indexCsv(first, isSplit);
    if (!indexed.ok) return indexed;
    let split: { source: ByteSource; rows: typeof indexed.rows } | null = null;
    if (isSplit) {
      const other = yield* indexCsv(second!, true);
      if (!other.ok) return other;
      split = { source: second!, rows: other.rows };
    }
    return { ok: true, readings: [{ words: '', source: turnedSource(csvSource(first, indexed.rows, split), layout) }] };
  }
  const readings = [{ words: '', source: wordSource(sources, layout) }];
  if (layout.word !== 'int8') {
    const byteOrder = layout.byteOrder === 'little' ? ('big' as const) : ('little' as const);
    readings.push({
      words: 'with the bytes of each word swapped',
      source: wordSource(sources, { ...layout, byteOrder }),
    });
  }
  if (layout.word !== 'float32') {
    const isOffset = layout.numberFormat === 'offsetBinary';
    readings.push({
      words: isOffset ? "as two's complement" : 'as offset binary',
      source: wordSource(sources, { ...layout, numberFormat: isOffset ? 'twosComplement' : 'offsetBinary' }),
    });
  }
  return { ok: true, readings };
}

/** Text's columns as the layout has them: I and Q swapped, Q negated. */
function turnedSource(source: SampleSource, { swapIq, negateQ }: CaptureLayout): SampleSource {
  if (!swapIq && !negateQ) return source;
  const sign = negateQ ? -1 : 1;
  return {
    samples: source.samples,
    read(first, count, out) {
      source.read(first, count, out);
      for (let i = 0; i < 2 * count; i += 2) {
        const [one, other] = [out[i]!, out[i + 1]!];
        out[i] = swapIq ? other : one;
        out[i + 1] = sign * (swapIq ? one : other);
      }
    },
  };
}

/** Samples of words, full scale 1. Bytes behind the last whole sample are left out; floats too large for any signal read as 0, those that are no numbers as NaN. */
function wordSource(sources: readonly ByteSource[], layout: CaptureLayout): SampleSource {
  const isSplit = layout.layout === 'split';
  const reader = createWordReader({ ...benchLike, ...layout, container: 'raw' });
  const width = layout.word === 'int8' ? 1 : layout.word === 'int16' ? 2 : 4;
  const perSample = isSplit ? width : 2 * width;
  const wordBytes = (source: ByteSource): number =>
    Math.max(0, Math.min(source.bytes - layout.headBytes, layout.dataBytes ?? Infinity));
  const samples = Math.min(
    ...sources.slice(0, isSplit ? 2 : 1).map((source) => Math.floor(wordBytes(source) / perSample)),
  );
  const scale = fullScaleOf(layout);
  const bytes = new Uint8Array(2 * width * BLOCK_SAMPLES);
  const half = new Uint8Array(isSplit ? width * BLOCK_SAMPLES : 0);
  return {
    samples,
    read(from, count, out) {
      for (let done = 0; done < count;) {
        const part = Math.min(BLOCK_SAMPLES, count - done);
        const at = layout.headBytes + (from + done) * perSample;
        if (isSplit) {
          for (const [column, source] of [sources[0]!, sources[1]!].entries()) {
            source.read(at, part * width, half);
            for (let i = 0; i < part; i++)
              for (let b = 0; b < width; b++) bytes[(2 * i + column) * width + b] = half[i * width + b]!;
          }
        } else sources[0]!.read(at, part * perSample, bytes);
        const target = out.subarray(2 * done, 2 * (done + part));
        reader.readSamples(bytes, 0, part, scale, target);
        if (layout.word === 'float32')
          for (let i = 0; i < 2 * part; i++)
            if (!(Math.abs(target[i]!) < 1e18)) target[i] = Number.isFinite(target[i]!) ? 0 : NaN;
        done += part;
      }
    },
  };
}

/** What a word reader asks of a profile beside the layout. */
const benchLike: BenchContent = {
  sampleClockHz: { least: 1, most: 1, step: null },
  word: 'int16',
  bits: 16,
  align: 'right',
  numberFormat: 'twosComplement',
  byteOrder: 'little',
  layout: 'interleaved',
  container: 'raw',
  swapIq: false,
  negateQ: false,
  granularitySamples: 1,
  leastSamples: 1,
  mostSamples: 1,
  leastHeadroomDb: 0,
  levelMeans: 'unknown',
  markers: { count: 0, packing: 'none', leastSamples: 1, stepSamples: 1 },
  modes: ['loop', 'burst'],
  fileName: { most: 60, extension: 'bin' },
};
