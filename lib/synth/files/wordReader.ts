import { demand } from '../errors';
import type { BenchContent } from '../types';
import { bytesPerSample, demandSupported } from './layout';

/** The bytes of a file back to words and samples. */
export interface WordReader {
  readonly bytesPerSample: number;
  /**
   * The words of `count` samples from bytes[at…] into `words` (2·count numbers, interleaved): integers as right-aligned
   * values, floats as stored.
   */
  readWords(bytes: Uint8Array, at: number, count: number, words: Float64Array): void;
  /** As readWords, divided by `scale`: samples in units of x. scale 0 gives zeros. */
  readSamples(bytes: Uint8Array, at: number, count: number, scale: number, samples: Float64Array): void;
}

/**
 * A reader of the layouts that createWordWriter writes. Left-aligned words are shifted back (their low bits dropped).
 * Throws SynthError `not_supported_yet`, `buffer_too_small` from the reads.
 */
export function createWordReader(bench: BenchContent): WordReader {
  demandSupported(bench);
  const size = bytesPerSample(bench);
  const isLittle = bench.byteOrder === 'little';
  const shift = bench.word === 'int16' && bench.align === 'left' ? 16 - bench.bits : 0;
  const width = size / 2;

  function readWords(bytes: Uint8Array, at: number, count: number, words: Float64Array): void {
    demand(bytes.length - at >= count * size, 'buffer_too_small', 'Fewer bytes than samples.');
    demand(words.length >= 2 * count, 'buffer_too_small', 'No room for the words.');
    const view = new DataView(bytes.buffer, bytes.byteOffset + at, count * size);
    if (bench.word === 'int8') for (let i = 0; i < 2 * count; i++) words[i] = view.getInt8(i);
    else if (bench.word === 'int16') {
      for (let i = 0; i < 2 * count; i++) words[i] = view.getInt16(width * i, isLittle) >> shift;
    } else for (let i = 0; i < 2 * count; i++) words[i] = view.getFloat32(width * i, isLittle);
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
