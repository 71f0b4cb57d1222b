import { demand } from '../errors';
import type { BenchContent } from '../types';
import { bytesPerWord, isHostLittleEndian, isLowByteFirst, offsetOf, shiftBits } from './layout';

/** The words of a vector (see createVectorGather) back to numbers and samples. */
export interface WordReader {
  /** Of the words, I and Q: what they take as text is another matter. */
  readonly bytesPerSample: number;
  /**
   * The words of `count` samples from bytes[at…] into `words` (2·count numbers, interleaved), as they were before swapping
   * and negating: integers as right-aligned values, floats as stored.
   */
  readWords(bytes: Uint8Array, at: number, count: number, words: Float64Array): void;
  /** As readWords, divided by `scale`: samples in units of x. scale 0 gives zeros. */
  readSamples(bytes: Uint8Array, at: number, count: number, scale: number, samples: Float64Array): void;
}

/**
 * A reader of the words that createWordWriter writes, I first and Q with its own sign again. Left-aligned words are shifted
 * back (their low bits dropped), offset binary is taken back. Throws SynthError `buffer_too_small` from the reads.
 */
export function createWordReader(bench: BenchContent): WordReader {
  const width = bytesPerWord(bench);
  const size = 2 * width;
  const isLittle = isLowByteFirst(bench);
  const shift = shiftBits(bench);
  const offset = offsetOf(bench);

  const isHost = isLittle === isHostLittleEndian && offset === 0;

  /** Numbers that lie as this machine keeps them, copied at once; false for others. */
  function copyStored(bytes: Uint8Array, at: number, numbers: number, words: Float64Array): boolean {
    const place = bytes.byteOffset + at;
    if (!isHost || place % width !== 0 || bench.word === 'int8') return false;
    if (bench.word === 'float32') words.set(new Float32Array(bytes.buffer, place, numbers));
    else if (shift === 0) words.set(new Int16Array(bytes.buffer, place, numbers));
    else return false;
    return true;
  }

  function readStored(view: DataView, numbers: number, words: Float64Array): void {
    if (bench.word === 'float32') for (let i = 0; i < numbers; i++) words[i] = view.getFloat32(4 * i, isLittle);
    else if (bench.word === 'int8') {
      for (let i = 0; i < numbers; i++) words[i] = offset === 0 ? view.getInt8(i) : view.getUint8(i) - offset;
    } else if (offset === 0) for (let i = 0; i < numbers; i++) words[i] = view.getInt16(2 * i, isLittle) >> shift;
    else for (let i = 0; i < numbers; i++) words[i] = (view.getUint16(2 * i, isLittle) >> shift) - offset;
  }

  function readWords(bytes: Uint8Array, at: number, count: number, words: Float64Array): void {
    demand(bytes.length - at >= count * size, 'buffer_too_small', 'Fewer bytes than samples.');
    demand(words.length >= 2 * count, 'buffer_too_small', 'No room for the words.');
    if (!copyStored(bytes, at, 2 * count, words))
      readStored(new DataView(bytes.buffer, bytes.byteOffset + at, count * size), 2 * count, words);
    if (bench.swapIq) {
      for (let i = 0; i < 2 * count; i += 2) {
        const first = words[i]!;
        words[i] = words[i + 1]!;
        words[i + 1] = first;
      }
    }
    if (bench.negateQ) for (let i = 1; i < 2 * count; i += 2) words[i] = 0 - words[i]!;
  }

  return {
    bytesPerSample: size,
    readWords,
    readSamples(bytes, at, count, scale, samples) {
      readWords(bytes, at, count, samples);
      for (let i = 0; i < 2 * count; i++) samples[i] = scale === 0 ? 0 : samples[i]! / scale;
    },
  };
}
