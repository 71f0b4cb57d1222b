import { demand } from '../errors';
import { quantize } from '../quantize/quantize';
import type { SaturationCount, WordScale } from '../quantize/types';
import type { BenchContent } from '../types';
import { bytesPerWord, isHostLittleEndian, isLowByteFirst, offsetOf, shiftBits } from './layout';

/** Samples to words in a file's own spelling, I and Q side by side, block by block. */
export interface WordWriter {
  readonly bytesPerSample: number;
  /** What saturated (integers) or lies beyond ±1 (floats) so far. */
  readonly saturated: SaturationCount;
  /**
   * Writes `count` interleaved samples as words to bytes[at…]; returns the bytes written. `bytes` must not share memory
   * with `samples`.
   */
  write(samples: Float64Array, count: number, bytes: Uint8Array, at?: number): number;
  /** How the engine makes the same bytes, where it can: its own byte order, saturated at −most−1 and most. */
  readonly direct: DirectWords | null;
}

/** Words that are the file's bytes as they are. */
export interface DirectWords {
  word: 'int16' | 'float32';
  scale: number;
  most: number;
}

/**
 * A writer of the profile's words, interleaved: int8, int16 of 8…16 bits left- or right-aligned (left: value·2^(16−b)),
 * float32; two's complement or offset binary; both byte orders; I first or Q first, Q negated or not. What becomes two
 * files, text or markers out of them is createVectorForm's. Integers are rounded half to even and saturate at −F−1 and F;
 * floats are rounded to single precision and not saturated. Q is negated before it is rounded.
 * Throws SynthError `buffer_too_small` from write.
 */
export function createWordWriter(bench: BenchContent, scale: WordScale): WordWriter {
  const size = 2 * bytesPerWord(bench);
  const saturated: SaturationCount = { components: 0, samples: 0 };
  const isLittle = isLowByteFirst(bench);
  const isTurned = bench.swapIq || bench.negateQ;
  const writeBlock =
    bench.word === 'float32'
      ? createFloatBlock(bench, scale, isLittle, saturated)
      : createIntegerBlock(bench, scale, isLittle, saturated);
  const isPlainNumber = shiftBits(bench) === 0 && offsetOf(bench) === 0;
  const isDirect = bench.word !== 'int8' && isLittle && isPlainNumber && !isTurned;
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

type BlockWriter = (samples: Float64Array, count: number, bytes: Uint8Array, at: number) => void;

function createIntegerBlock(
  bench: BenchContent,
  { scale, fullScale }: WordScale,
  isLittle: boolean,
  saturated: SaturationCount,
): BlockWriter {
  const shift = shiftBits(bench);
  const offset = offsetOf(bench);
  const isPlainNumber = shift === 0 && offset === 0 && !bench.swapIq;
  const isDirect = bench.word === 'int16' && isPlainNumber && isLittle === isHostLittleEndian;
  const scaleQ = bench.negateQ ? -scale : scale;
  let words = new Int16Array(0);
  return (samples, count, bytes, at) => {
    if (isDirect && (bytes.byteOffset + at) % 2 === 0) {
      const direct = new Int16Array(bytes.buffer, bytes.byteOffset + at, 2 * count);
      quantize(samples, count, scale, fullScale, direct, saturated, scaleQ);
      return;
    }
    if (words.length < 2 * count) words = new Int16Array(2 * count);
    quantize(samples, count, scale, fullScale, words, saturated, scaleQ);
    const other = bench.swapIq ? 1 : 0; // word i of a pair is component i, or the other one
    let to = at;
    if (bench.word === 'int8') {
      for (let i = 0; i < 2 * count; i++) bytes[to++] = words[i ^ other]! + offset;
      return;
    }
    const lowPlace = isLittle ? 0 : 1;
    for (let i = 0; i < 2 * count; i++, to += 2) {
      const word = (words[i ^ other]! + offset) << shift;
      bytes[to + lowPlace] = word;
      bytes[to + 1 - lowPlace] = word >> 8;
    }
  };
}

function createFloatBlock(
  { swapIq, negateQ }: BenchContent,
  { scale }: WordScale,
  isLittle: boolean,
  saturated: SaturationCount,
): BlockWriter {
  const placeOfI = swapIq ? 4 : 0;
  return (samples, count, bytes, at) => {
    const view = new DataView(bytes.buffer, bytes.byteOffset + at, 8 * count);
    for (let i = 0; i < 2 * count; i += 2) {
      const re = Math.fround(samples[i]! * scale);
      const own = Math.fround(samples[i + 1]! * scale);
      const im = negateQ ? 0 - own : own; // never −0
      const over = (Math.abs(re) > 1 ? 1 : 0) + (Math.abs(im) > 1 ? 1 : 0);
      if (over > 0) {
        saturated.components += over;
        saturated.samples++;
      }
      view.setFloat32(4 * i + placeOfI, re, isLittle);
      view.setFloat32(4 * i + 4 - placeOfI, im, isLittle);
    }
  };
}
