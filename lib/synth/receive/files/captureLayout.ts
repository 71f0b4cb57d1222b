import type { BenchContent } from '../../types';

/** Bytes of a file, read where asked; in a browser's worker and in Node alike without waiting. */
export interface ByteSource {
  readonly bytes: number;
  /** Writes bytes at…at+count−1 (within the file) to out[0…count−1]. */
  read(at: number, count: number, out: Uint8Array): void;
}

/** How a capture's bytes hold its samples. */
export interface CaptureLayout {
  container: 'raw' | 'wav' | 'npy' | 'csv';
  word: BenchContent['word'];
  /** 8…16, right- or left-aligned in 16-bit words; full scale is 2^(bits−1) − 1, for floats 1. */
  bits: number;
  align: BenchContent['align'];
  numberFormat: BenchContent['numberFormat'];
  byteOrder: BenchContent['byteOrder'];
  /** Split: two files, I's and Q's. */
  layout: BenchContent['layout'];
  /** Q stands where I is expected. A mirrored spectrum is found without being told. */
  swapIq: boolean;
  negateQ: boolean;
  /** Bytes before the first word of each file. */
  headBytes: number;
  /** Bytes of the words; null: to the end of the file. */
  dataBytes: number | null;
}

/** Why a file's head cannot be taken, in words. */
export type LayoutOutcome =
  { ok: true; layout: CaptureLayout; clockHz: number | null } | { ok: false; message: string };

/** 16-bit integers, the layout that receivers write most. */
export const plainLayout: CaptureLayout = {
  container: 'raw',
  word: 'int16',
  bits: 16,
  align: 'right',
  numberFormat: 'twosComplement',
  byteOrder: 'little',
  layout: 'interleaved',
  swapIq: false,
  negateQ: false,
  headBytes: 0,
  dataBytes: null,
};

/** The layout of a generator's own files, for captures that come back the same way. */
export function layoutOfBench(bench: BenchContent): CaptureLayout {
  return {
    container: bench.container,
    word: bench.word,
    bits: bench.word === 'int8' ? 8 : bench.bits,
    align: bench.word === 'int16' ? bench.align : 'right',
    numberFormat: bench.numberFormat,
    byteOrder: bench.byteOrder,
    layout: bench.layout,
    swapIq: bench.swapIq,
    negateQ: bench.negateQ,
    headBytes: 0,
    dataBytes: null,
  };
}

/** A layout in words for screens and the command line: "16-bit integers, little-endian, interleaved". */
export function layoutWords(layout: CaptureLayout): string {
  if (layout.container === 'csv') return 'decimal numbers as text, I and Q in a row';
  const isOffset = layout.numberFormat === 'offsetBinary';
  const words = [
    layout.word === 'float32'
      ? '32-bit floats'
      : layout.word === 'int8'
        ? `8-bit integers${isOffset ? ', offset binary' : ''}`
        : `${layout.bits}-bit integers${layout.bits < 16 ? ` in 16-bit words, ${layout.align}-aligned` : ''}${isOffset ? ', offset binary' : ''}`,
  ];
  if (layout.word !== 'int8') words.push(layout.byteOrder === 'little' ? 'little-endian' : 'big-endian');
  words.push(layout.layout === 'split' ? 'I and Q in two files' : 'I and Q in turn');
  if (layout.swapIq) words.push('Q first');
  if (layout.negateQ) words.push('Q negated');
  if (layout.container !== 'raw') words.push(layout.container === 'wav' ? 'WAV' : 'NumPy');
  return words.join(', ');
}
