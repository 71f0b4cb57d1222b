import type { BenchContent } from '../types';

/** Typed arrays use the machine's byte order; files use the profile's. */
export const isHostLittleEndian = new Uint8Array(new Uint16Array([1]).buffer)[0] === 1;

/** Characters of a number in a CSV file ("+1.23456789e-01") and of the comma or line feed behind it. */
export const CSV_CELL = 16;

/** Bytes of one word (I or Q) of a profile before it becomes text: 1, 2 or 4. */
export function bytesPerWord(bench: Pick<BenchContent, 'word'>): number {
  return bench.word === 'int8' ? 1 : bench.word === 'int16' ? 2 : 4;
}

/** Bytes of one sample (I and Q) in the profile's file, or in its two files together. */
export function bytesPerSample(bench: Pick<BenchContent, 'word' | 'container'>): number {
  return 2 * (bench.container === 'csv' ? CSV_CELL : bytesPerWord(bench));
}

/** Places that a word is moved up: left-aligned words of fewer than 16 bits. */
export function shiftBits(bench: Pick<BenchContent, 'word' | 'align' | 'bits'>): number {
  return bench.word === 'int16' && bench.align === 'left' ? 16 - bench.bits : 0;
}

/** Words that become text are put together with the low byte first; all others in the profile's order. */
export function isLowByteFirst(bench: Pick<BenchContent, 'byteOrder' | 'container'>): boolean {
  return bench.container === 'csv' || bench.byteOrder === 'little';
}

/** What is added to an integer before it is stored: 0, or 2^(bits−1) in offset binary. */
export function offsetOf(bench: Pick<BenchContent, 'word' | 'bits' | 'numberFormat'>): number {
  return bench.word !== 'float32' && bench.numberFormat === 'offsetBinary' ? 1 << (bench.bits - 1) : 0;
}
