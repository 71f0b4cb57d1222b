import type { BenchContent } from '../types';
import { bytesPerWord } from './layout';

const ascii = (text: string): Uint8Array => Uint8Array.from(text, (letter) => letter.charCodeAt(0));

const MOST_32_BITS = 4294967295;
const PCM = 1;
const IEEE_FLOAT = 3;
const NPY_BLOCK = 64;
const NPY_FIXED = 10;

/**
 * The head of a WAV file of two channels: RIFF, fmt, for floats fact, data (Multimedia Programming Interface and Data
 * Specifications 1.0 with its new multimedia types). 44 bytes for integers, 58 for floats. The clock is rounded to whole
 * hertz; a byte rate that passes 32 bits stands as the largest number.
 */
export function wavHead(bench: Pick<BenchContent, 'word'>, samples: number, sampleClockHz: number): Uint8Array {
  const isFloat = bench.word === 'float32';
  const block = 2 * bytesPerWord(bench);
  const dataBytes = samples * block;
  const head = new Uint8Array(isFloat ? 58 : 44);
  const view = new DataView(head.buffer);
  const clock = Math.round(sampleClockHz);
  head.set(ascii('RIFF'), 0);
  view.setUint32(4, head.length - 8 + dataBytes, true);
  head.set(ascii('WAVEfmt '), 8);
  view.setUint32(16, isFloat ? 18 : 16, true);
  view.setUint16(20, isFloat ? IEEE_FLOAT : PCM, true);
  view.setUint16(22, 2, true);
  view.setUint32(24, clock, true);
  view.setUint32(28, Math.min(clock * block, MOST_32_BITS), true);
  view.setUint16(32, block, true);
  view.setUint16(34, 8 * bytesPerWord(bench), true);
  if (isFloat) {
    head.set(ascii('fact'), 38);
    view.setUint32(42, 4, true);
    view.setUint32(46, samples, true);
  }
  head.set(ascii('data'), head.length - 8);
  view.setUint32(head.length - 4, dataBytes, true);
  return head;
}

type NpyBench = Pick<BenchContent, 'word' | 'numberFormat' | 'byteOrder' | 'layout' | 'swapIq' | 'negateQ'>;

/** True where a file's items are the signal x itself, so that a complex type says no more than there is. */
export function isComplexNpy(bench: NpyBench): boolean {
  return bench.word === 'float32' && bench.layout === 'interleaved' && !bench.swapIq && !bench.negateQ;
}

/** NumPy's name of one item: a word, or I and Q as one complex number. */
export function npyType(bench: NpyBench): string {
  const order = bench.byteOrder === 'little' ? '<' : '>';
  if (isComplexNpy(bench)) return `${order}c8`;
  if (bench.word === 'float32') return `${order}f4`;
  const kind = bench.numberFormat === 'offsetBinary' ? 'u' : 'i';
  return bench.word === 'int8' ? `|${kind}1` : `${order}${kind}2`;
}

/**
 * The head of a .npy file, version 1.0, C order: shape [samples, 2] of words, [samples] of complex64, or [samples] in each
 * of two files. A multiple of 64 bytes (NumPy's format description, numpy.lib.format).
 */
export function npyHead(bench: NpyBench, samples: number): Uint8Array {
  const shape = bench.layout === 'split' || isComplexNpy(bench) ? `(${samples},)` : `(${samples}, 2)`;
  const text = `{'descr': '${npyType(bench)}', 'fortran_order': False, 'shape': ${shape}, }`;
  const bytes = Math.ceil((NPY_FIXED + text.length + 1) / NPY_BLOCK) * NPY_BLOCK;
  const head = new Uint8Array(bytes).fill(0x20);
  head.set(ascii('\u0093NUMPY\u0001\u0000'), 0);
  new DataView(head.buffer).setUint16(8, bytes - NPY_FIXED, true);
  head.set(ascii(text), NPY_FIXED);
  head[bytes - 1] = 0x0a;
  return head;
}

/** The header line of a CSV file: the columns' names in their order, for a file of one column its name alone. */
export function csvHead(columns: readonly string[]): Uint8Array {
  return ascii(`${columns.join(',')}\n`);
}
