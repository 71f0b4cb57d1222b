import { demand } from '../errors';
import { quantize } from '../quantize/quantize';
import type { SaturationCount, WordScale } from '../quantize/types';
import type { BenchContent } from '../types';
import { bytesPerSample, demandSupported, isHostLittleEndian } from './layout';

/** Samples to the bytes of a file, block by block. */
export interface WordWriter {
  readonly bytesPerSample: number;
  /** What saturated (integers) or lies beyond ±1 (floats) so far. */
  readonly saturated: SaturationCount;
  /**
   * Writes `count` interleaved samples as words to bytes[at…]; returns the bytes written. `bytes` must not share memory
   * with `samples`.
   */
  write(samples: Float64Array, count: number, bytes: Uint8Array, at?: number): number;
  /** How the engine makes the same bytes: interleaved words in its own byte order, saturated at −most−1 and most. */
  readonly direct: DirectWords | null;
}

/** Words that are the file's bytes as they are. */
export interface DirectWords {
  word: 'int16' | 'float32';
  scale: number;
  most: number;
}

/**
 * A writer of the profile's words: interleaved, raw; int8, int16 of 8…16 bits left- or right-aligned (left: value·2^(16−b)),
 * float32; two's complement; both byte orders. Integers are rounded half to even and saturate at −F−1 and F; floats are
 * rounded to single precision and not saturated.
 * Throws SynthError `not_supported_yet` for another layout, `buffer_too_small` from write.
 */
export function createWordWriter(bench: BenchContent, scale: WordScale): WordWriter {
  demandSupported(bench);
  const size = bytesPerSample(bench);
  const saturated: SaturationCount = { components: 0, samples: 0 };
  const isLittle = bench.byteOrder === 'little';
  const writeBlock =
    bench.word === 'float32'
      ? createFloatBlock(scale, isLittle, saturated)
      : createIntegerBlock(bench, scale, isLittle, saturated);
  const isDirect = bench.word !== 'int8' && isLittle && (bench.word === 'float32' || shiftOf(bench) === 0);
  return {
    bytesPerSample: size,
    saturated,
    direct: isDirect
      ? { word: bench.word === 'int16' ? 'int16' : 'float32', scale: scale.scale, most: scale.fullScale }
      : null,
    write(samples, count, bytes, at = 0) {
      demand(samples.length >= 2 * count, 'buffer_too_small', 'Fewer samples than said.');
      demand(bytes.length - at >= count * size, 'buffer_too_small', 'No room for the words.');
      writeBlock(samples, count, bytes, at);
      return count * size;
    },
  };
}

/** Places that a word is moved up: left-aligned words of fewer than 16 bits. */
function shiftOf(bench: BenchContent): number {
  return bench.word === 'int16' && bench.align === 'left' ? 16 - bench.bits : 0;
}

type BlockWriter = (samples: Float64Array, count: number, bytes: Uint8Array, at: number) => void;

function createIntegerBlock(
  bench: BenchContent,
  { scale, fullScale }: WordScale,
  isLittle: boolean,
  saturated: SaturationCount,
): BlockWriter {
  const shift = shiftOf(bench);
  const isDirect = bench.word === 'int16' && shift === 0 && isLittle === isHostLittleEndian;
  let words = new Int16Array(0);
  return (samples, count, bytes, at) => {
    if (isDirect && (bytes.byteOffset + at) % 2 === 0) {
      quantize(
        samples,
        count,
        scale,
        fullScale,
        new Int16Array(bytes.buffer, bytes.byteOffset + at, 2 * count),
        saturated,
      );
      return;
    }
    if (words.length < 2 * count) words = new Int16Array(2 * count);
    quantize(samples, count, scale, fullScale, words, saturated);
    let to = at;
    if (bench.word === 'int8') {
      for (let i = 0; i < 2 * count; i++) bytes[to++] = words[i]!;
      return;
    }
    const lowPlace = isLittle ? 0 : 1;
    for (let i = 0; i < 2 * count; i++, to += 2) {
      const word = words[i]! << shift;
      bytes[to + lowPlace] = word;
      bytes[to + 1 - lowPlace] = word >> 8;
    }
  };
}

function createFloatBlock({ scale }: WordScale, isLittle: boolean, saturated: SaturationCount): BlockWriter {
  return (samples, count, bytes, at) => {
    const view = new DataView(bytes.buffer, bytes.byteOffset + at, 8 * count);
    for (let i = 0; i < 2 * count; i += 2) {
      const re = Math.fround(samples[i]! * scale);
      const im = Math.fround(samples[i + 1]! * scale);
      const over = (Math.abs(re) > 1 ? 1 : 0) + (Math.abs(im) > 1 ? 1 : 0);
      if (over > 0) {
        saturated.components += over;
        saturated.samples++;
      }
      view.setFloat32(4 * i, re, isLittle);
      view.setFloat32(4 * i + 4, im, isLittle);
    }
  };
}
