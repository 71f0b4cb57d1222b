import { demand, SynthError } from '../errors';
import type { BenchContent, WaveformContent } from '../types';
import { readCsvLines, writeCsvLines } from './csvWords';
import { bytesPerWord, CSV_CELL, shiftBits } from './layout';
import { layoutRefusals, vectorRefusals } from './layoutRules';
import { markerBytes } from './markers';
import { joinWords, splitWords } from './splitWords';
import { vectorFiles, type VectorFile } from './vectorFiles';

/** From the words of createWordWriter to the bytes of a vector's files, block by block, from the first sample on. */
export interface VectorForm {
  readonly files: readonly VectorFile[];
  /** The words are the one file's bytes behind its head, as they are: `form` gives back what it is given. */
  readonly isPlain: boolean;
  /**
   * The next `count` samples' bytes for each file, heads left out; valid until the next call. Marker bits are set in `words`
   * itself. Blocks come in file order; their sizes are free.
   */
  form(words: Uint8Array, count: number): readonly Uint8Array[];
  /** Blocks go on at a sample; upwards is fastest. */
  seek(sample: number): void;
  /** Back to the first sample. */
  rewind(): void;
}

/** The other way: from the bytes of the files to the words that createWordReader reads. Blocks come in any order. */
export interface VectorGather {
  /** The words of `count` samples, of which `parts` holds each file's bytes; valid until the next call. Marker bits stay in. */
  gather(parts: readonly Uint8Array[], count: number): Uint8Array;
  /** The low bits of gathered words as marker bytes, one a sample, bit m of marker m; zeros where the profile has none there. */
  readMarkers(words: Uint8Array, count: number, markers: Uint8Array): void;
}

/** Throws SynthError `bad_layout` in words, naming the first field, for a layout that no file can have. */
export function demandLayout(bench: BenchContent): void {
  const [refusal] = layoutRefusals(bench);
  if (refusal) throw new SynthError('bad_layout', `The profile's ${refusal.path.join('/')} ${refusal.words}.`);
}

/** Where marker bits stand: the first word of a sample holds markers 0…free−1 from bit 0 up, the second the next ones. */
function lowBitsOf(bench: BenchContent): { free: number; mask: number; low: number } | null {
  if (bench.markers.packing !== 'lowBits') return null;
  const free = shiftBits(bench);
  return { free, mask: (1 << free) - 1, low: bench.byteOrder === 'little' ? 0 : 1 };
}

/**
 * The form of a document's vector in a profile's layout: interleaved or split in two files, with their heads, as text, with
 * marker bits. Memory: one block.
 * Throws SynthError `bad_layout` where no file can have the layout, `too_large` where this vector cannot, `marker_outside`
 * as markerBytes does, `buffer_too_small` from form.
 */
export function createVectorForm(content: WaveformContent, bench: BenchContent): VectorForm {
  demandLayout(bench);
  const [refusal] = vectorRefusals(content, bench);
  if (refusal) throw new SynthError('too_large', refusal.words);
  const files = vectorFiles(content, bench);
  const width = bytesPerWord(bench);
  const isText = bench.container === 'csv';
  const bits = content.markers.length > 0 ? lowBitsOf(bench) : null;
  const markers = bits === null ? null : markerBytes(content);
  const isFormed = isText || files.length === 2;
  let marks = new Uint8Array(0);
  let outs: Uint8Array[] = [];

  function mark(words: Uint8Array, count: number): void {
    const { free, mask, low } = bits!;
    if (marks.length < count) marks = new Uint8Array(count);
    markers!.read(marks.subarray(0, count));
    for (let i = 0; i < count; i++) {
      const now = marks[i]!;
      if (now === 0) continue;
      words[4 * i + low]! |= now & mask;
      words[4 * i + 2 + low]! |= (now >> free) & mask;
    }
  }

  return {
    files,
    isPlain: !isFormed && bits === null,
    form(words, count) {
      demand(words.length >= 2 * width * count, 'buffer_too_small', 'Fewer words than samples.');
      if (bits !== null) mark(words, count);
      if (!isFormed) return [words.subarray(0, 2 * width * count)];
      if (outs.length === 0 || outs[0]!.length < count * files[0]!.bytesPerSample)
        outs = files.map(({ bytesPerSample }) => new Uint8Array(count * bytesPerSample));
      const parts = files.map(({ bytesPerSample }, i) => outs[i]!.subarray(0, count * bytesPerSample));
      if (!isText) splitWords(words, width, count, parts[0]!, parts[1]!);
      else files.forEach(({ wordsPerSample }, i) => writeCsvLines(words, count, i, wordsPerSample, parts[i]!));
      return parts;
    },
    seek: (sample) => markers?.seek(sample),
    rewind: () => markers?.rewind(),
  };
}

/** The reader's side of createVectorForm, for any vector of the layout. Throws SynthError `bad_layout`, `buffer_too_small`. */
export function createVectorGather(bench: BenchContent): VectorGather {
  demandLayout(bench);
  const width = bytesPerWord(bench);
  const isText = bench.container === 'csv';
  const isSplit = bench.layout === 'split';
  const bits = lowBitsOf(bench);
  let room = new Uint8Array(0);
  return {
    gather(parts, count) {
      const size = (isText ? CSV_CELL : width) * (isSplit ? 1 : 2);
      demand(
        parts.length === (isSplit ? 2 : 1) && parts.every((part) => part.length >= size * count),
        'buffer_too_small',
        'Fewer bytes than samples.',
      );
      if (!isText && !isSplit) return parts[0]!.subarray(0, 2 * width * count);
      if (room.length < 2 * width * count) room = new Uint8Array(2 * width * count);
      if (!isText) joinWords(parts[0]!, parts[1]!, width, count, room);
      else parts.forEach((part, i) => readCsvLines(part, count, i, isSplit ? 1 : 2, room));
      return room.subarray(0, 2 * width * count);
    },
    readMarkers(words, count, markers) {
      if (bits === null) {
        markers.fill(0, 0, count);
        return;
      }
      const { free, mask, low } = bits;
      for (let i = 0; i < count; i++)
        markers[i] = (words[4 * i + low]! & mask) | ((words[4 * i + 2 + low]! & mask) << free);
    },
  };
}
