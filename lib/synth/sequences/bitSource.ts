import { SynthError } from '../errors';
import type { PayloadSource } from '../types';
import { decodeBase64 } from './base64';
import { createWordRegister } from './register';

/** An endless sequence of bits that can be read from anywhere. */
export interface BitSource {
  /** Bits after which the sequence repeats itself for certain (not always the least number), null when not known. */
  readonly periodBits: number | null;
  /** Where given, word i (from the last tap on) is the exclusive or of the words i − tap, and of all ones where inverted. */
  readonly recurrence: WordRecurrence | null;
  /**
   * Writes `count` packed words from word number `first` on to out[at…]: word i holds bits 32i…32i+31, the first as the
   * most significant. Upward reading without holes is fastest.
   */
  readWords(first: number, count: number, out: Uint32Array, at: number): void;
  /** Bit number `index` ≥ 0 (at most 2^53): 0 or 1. For single bits; keeps a small window. */
  bit(index: number): number;
}

/** How the packed words of a register's sequence follow from earlier ones. */
export interface WordRecurrence {
  taps: readonly number[];
  inverted: boolean;
}

const WINDOW_WORDS = 64;

function withBits(
  periodBits: number | null,
  readWords: (first: number, count: number, out: Uint32Array, at: number) => void,
  recurrence: WordRecurrence | null = null,
): BitSource {
  const window = new Uint32Array(WINDOW_WORDS);
  let windowFirst = -1;
  return {
    periodBits,
    recurrence,
    readWords,
    bit(index) {
      const word = Math.floor(index / 32);
      if (windowFirst < 0 || word < windowFirst || word >= windowFirst + WINDOW_WORDS) {
        windowFirst = word - (word % WINDOW_WORDS);
        readWords(windowFirst, WINDOW_WORDS, window, 0);
      }
      return (window[word - windowFirst]! >>> (31 - (index % 32))) & 1;
    },
  };
}

/** `bits` bits packed in bytes, most significant first, repeated for ever. */
function cyclicSource(bytes: Uint8Array, bits: number): BitSource {
  // lengthened by at least 64 bits of its own repetition, so that a word never has to be cut at the end
  const long = new Uint8Array(Math.ceil((bits + 64) / 8) + 8);
  if (bits >= 64 && bits % 8 === 0) {
    long.set(bytes.subarray(0, bits / 8));
    long.set(long.subarray(0, long.length - bits / 8), bits / 8);
  } else {
    for (let i = 0; i < long.length * 8; i++) {
      const from = i % bits;
      if ((bytes[from >> 3]! >> (7 - (from & 7))) & 1) long[i >> 3]! |= 128 >> (i & 7);
    }
  }
  return withBits(bits, (first, count, out, at) => {
    let place = (first * 32) % bits;
    const step = 32 % bits;
    for (let i = 0; i < count; i++) {
      const byte = place >> 3;
      const shift = place & 7;
      const head = (long[byte]! << 24) | (long[byte + 1]! << 16) | (long[byte + 2]! << 8) | long[byte + 3]!;
      out[at + i] = shift === 0 ? head : (head << shift) | (long[byte + 4]! >> (8 - shift));
      place += step;
      if (place >= bits) place -= bits;
    }
  });
}

const GOLD_SKIP_WORDS = 50; // N_C = 1600 bits

function goldSource(cInit: number): BitSource {
  const first = createWordRegister(31, [28, 31], 1);
  const second = createWordRegister(31, [28, 29, 30, 31], cInit);
  let scratch = new Uint32Array(0);
  return withBits(2147483647, (from, count, out, at) => {
    if (scratch.length < count) scratch = new Uint32Array(count);
    first.readWords(from + GOLD_SKIP_WORDS, count, out, at);
    second.readWords(from + GOLD_SKIP_WORDS, count, scratch, 0);
    for (let i = 0; i < count; i++) out[at + i]! ^= scratch[i]!;
  });
}

/**
 * The endless bits of a payload source, or of a register or Gold sequence of a pilot.
 * Gold: c(n) of length-31 registers, N_C = 1600. Source: TS 38.211 5.2.1; ITU-T O.150 for the registers' form.
 * Bits are numbered from 0 on and may be read in any order; a source keeps windows of its own and is not for two callers at once.
 * Throws SynthError `bad_content` for an upload that is not base64 or too short.
 */
export function createBitSource(source: PayloadSource): BitSource {
  switch (source.kind) {
    case 'pn': {
      const register = createWordRegister(source.stages, source.taps, source.seed);
      const isOdd = source.taps.length % 2 === 1;
      const recurrence = { taps: source.taps, inverted: source.inverted && !isOdd };
      if (!source.inverted) return withBits(null, register.readWords, recurrence);
      const readInverted = (first: number, count: number, out: Uint32Array, at: number): void => {
        register.readWords(first, count, out, at);
        for (let i = at; i < at + count; i++) out[i] = ~out[i]!;
      };
      return withBits(null, readInverted, recurrence);
    }
    case 'gold':
      return goldSource(source.cInit);
    case 'zeros':
      return withBits(1, (_first, count, out, at) => void out.fill(0, at, at + count));
    case 'ones':
      return withBits(1, (_first, count, out, at) => void out.fill(0xffffffff, at, at + count));
    case 'pattern': {
      const bytes = new Uint8Array(Math.ceil(source.bits.length / 8));
      for (let i = 0; i < source.bits.length; i++) if (source.bits[i] === '1') bytes[i >> 3]! |= 128 >> (i & 7);
      if (source.bits.length === 0) throw new SynthError('bad_content', 'A pattern has at least one bit.');
      return cyclicSource(bytes, source.bits.length);
    }
    case 'uploaded': {
      const bytes = decodeBase64(source.base64);
      if (source.bitCount < 1 || bytes.length * 8 < source.bitCount) {
        throw new SynthError('bad_content', `The upload ${source.name} has fewer bits than it says.`);
      }
      return cyclicSource(bytes, source.bitCount);
    }
  }
}
