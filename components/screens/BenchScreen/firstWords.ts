import { emptyDocument } from '@/lib/document/newDocument';
import {
  createVectorForm,
  createVectorGather,
  createWordReader,
  createWordWriter,
  fullScaleOf,
  markerBytes,
  type BenchContent,
  type VectorFile,
  type WaveformContent,
} from '@/lib/synth';

/** One word as it lies in a file. */
export interface ShownWord {
  name: 'I' | 'Q';
  sample: number;
  /** In file order, as text the characters' codes. */
  bytes: number[];
  /** As it is stored: Q negated where the profile says so. */
  value: number;
}

/** The beginning of one file. */
export interface ShownFile {
  role: VectorFile['role'];
  ending: VectorFile['ending'];
  headBytes: number;
  words: ShownWord[];
  /** The first lines, where the file is text. */
  lines: string[] | null;
}

export interface FirstWords {
  files: ShownFile[];
  /** Marker bits of the first samples, one byte a sample, where the profile has markers in bytes or words. */
  markers: number[];
}

const SHOWN_BYTES = 16;

/** Samples that fill the picture: sixteen bytes of a file. */
export function shownSamples(bench: BenchContent): number {
  const width = bench.word === 'int8' ? 1 : bench.word === 'int16' ? 2 : 4;
  return bench.container === 'csv' ? 4 : SHOWN_BYTES / width / (bench.layout === 'split' ? 1 : 2);
}

/** A stand-in waveform as long as the picture, with marker m on at sample m. */
export function rampContent(bench: BenchContent): WaveformContent {
  const samples = 16;
  const { content } = emptyDocument({ content: { fftSize: samples, symbolCount: 1, prefixSamples: [0] } });
  const markers = Array.from({ length: bench.markers.count }, (_, m) => ({
    name: `marker ${m + 1}`,
    at: 'file' as const,
    symbol: null,
    offsetSamples: m,
    lengthSamples: 1,
  }));
  return { ...content, markers };
}

/** I counts up 1, 2, 3, Q down −1, −2, −3, in steps of the word; floats in quarters. */
export function rampSamples(bench: BenchContent): Float64Array {
  const step = bench.word === 'float32' ? 0.25 : 1;
  return Float64Array.from(
    { length: 2 * shownSamples(bench) },
    (_, i) => step * (i % 2 === 0 ? i / 2 + 1 : -(i + 1) / 2),
  );
}

/**
 * The first words of a vector as this profile's files begin, by the writer that writes the packs. `samples` in units that
 * `scale` brings to words; markers are those of `content`. Null for a layout that no file can have.
 */
export function firstWords(
  bench: BenchContent,
  content: WaveformContent,
  samples: Float64Array,
  scale: number,
): FirstWords | null {
  const count = samples.length / 2;
  try {
    const form = createVectorForm(content, bench);
    const fullScale = fullScaleOf(bench);
    const writer = createWordWriter(bench, { scale, fullScale, referenceLevel: 1, isSilent: false });
    const words = new Uint8Array(count * writer.bytesPerSample);
    writer.write(samples, count, words);
    const parts = form.form(words, count).map((part) => part.slice());
    // in file order and as stored: neither swapped nor negated back
    const stored = new Float64Array(2 * count);
    const reader = createWordReader({ ...bench, swapIq: false, negateQ: false });
    reader.readWords(createVectorGather(bench).gather(parts, count), 0, count, stored);
    const isText = bench.container === 'csv';
    const files = form.files.map((file, f): ShownFile => {
      const { wordsPerSample, bytesPerSample, head } = file;
      const size = bytesPerSample / wordsPerSample;
      return {
        role: file.role,
        ending: file.ending,
        headBytes: head.length,
        words: Array.from({ length: count * wordsPerSample }, (_, w) => {
          const sample = Math.floor(w / wordsPerSample);
          const column = wordsPerSample === 2 ? w % 2 : f;
          return {
            name: (column === 1) !== bench.swapIq ? 'Q' : 'I',
            sample,
            bytes: Array.from(parts[f]!.subarray(w * size, (w + 1) * size)),
            value: stored[2 * sample + column]!,
          };
        }),
        lines: isText ? textOf(head, parts[f]!) : null,
      };
    });
    const marks = new Uint8Array(bench.markers.packing === 'none' ? 0 : SHOWN_BYTES);
    const marked = marks.length === 0 ? 0 : markerBytes(content).read(marks);
    return { files, markers: Array.from(marks.subarray(0, marked)) };
  } catch {
    return null;
  }
}

const textOf = (...parts: Uint8Array[]): string[] =>
  parts
    .flatMap((part) => Array.from(part, (code) => String.fromCharCode(code)))
    .join('')
    .trimEnd()
    .split('\n');
