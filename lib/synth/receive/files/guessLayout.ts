import { log10 } from '../../math/exponential';
import { isNpy, isWav, readNpyHead, readWavHead } from './containers';
import { plainLayout, type ByteSource, type CaptureLayout, type LayoutOutcome } from './captureLayout';

const HEAD_BYTES = 65536;
const PIECE_BYTES = 16384;
const PIECES = 16;
/** Bytes are looked at from here on: 8-bit words take even numbers, floats a multiple of eight. */
const STEP_BYTES = 64;

/**
 * A file's layout from its bytes and what is expected (the pack's own layout, or null). A container says what it holds; raw words are told
 * apart by their exponents (floats), by which byte is the quieter one (16 bits and their order), by low bits that are always 0 (left-aligned)
 * and by where the quiet byte stands (two's complement around 0, offset binary around the middle). What the bytes leave open is taken from
 * `expected`, but for swapped or negated components: those are the generator's. `isSplit`: the file is one of two, I's and Q's.
 */
export function guessLayout(source: ByteSource, expected: CaptureLayout | null, isSplit = false): LayoutOutcome {
  if (source.bytes === 0) return { ok: false, message: 'The file is empty.' };
  const head = new Uint8Array(Math.min(HEAD_BYTES, source.bytes));
  source.read(0, head.length, head);
  if (isWav(head)) return withExpectedBits(readWavHead(head), expected);
  if (isNpy(head)) return withExpectedBits(readNpyHead(head, isSplit), expected);
  const layout: CaptureLayout['layout'] = isSplit ? 'split' : 'interleaved';
  if (isText(head))
    return {
      ok: true,
      clockHz: null,
      layout: { ...plainLayout, container: 'csv', word: 'float32', layout },
    };
  const base: CaptureLayout = {
    ...(expected !== null && expected.container !== 'csv' ? expected : plainLayout),
    container: 'raw',
    layout,
    // what a profile swaps for its generator's sake stands right on the air again
    swapIq: false,
    negateQ: false,
    headBytes: 0,
    dataBytes: null,
  };
  return { ok: true, clockHz: null, layout: guessWords(someBytes(source), base) };
}

/** A head of 16-bit words does not say how many of the bits are used: where it is the file that is expected, its bits are. */
function withExpectedBits(found: LayoutOutcome, expected: CaptureLayout | null): LayoutOutcome {
  if (!found.ok || expected === null) return found;
  const { layout } = found;
  const isSame =
    layout.word === 'int16' &&
    (['container', 'word', 'numberFormat', 'byteOrder', 'layout'] as const).every(
      (key) => layout[key] === expected[key],
    );
  return isSame ? { ...found, layout: { ...layout, bits: expected.bits, align: expected.align } } : found;
}

/** Digits, signs and separators only, with a letter or two in a first line. */
function isText(head: Uint8Array): boolean {
  let lineEnds = 0;
  let others = 0;
  for (const byte of head) {
    if (byte === 0x0a) lineEnds++;
    else if (byte !== 0x09 && byte !== 0x0d && (byte < 0x20 || byte > 0x7e)) others++;
  }
  return others === 0 && (lineEnds > 0 || head.length < 64);
}

/** Pieces from all over the file, each from a multiple of 64 bytes. */
function someBytes(source: ByteSource): Uint8Array {
  if (source.bytes <= PIECES * PIECE_BYTES) {
    const all = new Uint8Array(source.bytes - (source.bytes % 8 === 0 || source.bytes < 8 ? 0 : source.bytes % 8));
    source.read(0, all.length, all);
    return all;
  }
  const pieces = new Uint8Array(PIECES * PIECE_BYTES);
  const stride = Math.floor((source.bytes - PIECE_BYTES) / (PIECES - 1) / STEP_BYTES) * STEP_BYTES;
  for (let i = 0; i < PIECES; i++)
    source.read(i * stride, PIECE_BYTES, pieces.subarray(i * PIECE_BYTES, (i + 1) * PIECE_BYTES));
  return pieces;
}

function guessWords(bytes: Uint8Array, base: CaptureLayout): CaptureLayout {
  const little = floatShare(bytes, true);
  const big = floatShare(bytes, false);
  if (Math.max(little, big) > 0.98 && Math.abs(little - big) > 0.2)
    return {
      ...base,
      word: 'float32',
      bits: 16,
      align: 'right',
      numberFormat: 'twosComplement',
      byteOrder: little > big ? 'little' : 'big',
    };
  const even = byteFacts(bytes, 0);
  const odd = byteFacts(bytes, 1);
  // low bits that are never set belong to the low byte of a left-aligned word
  const evenLow = isLowByte(even, odd, base);
  const oddLow = isLowByte(odd, even, base);
  const apart = even.entropy - odd.entropy;
  if (evenLow || oddLow || Math.abs(apart) > 0.35) {
    const isLittle = evenLow || (!oddLow && apart > 0);
    const high = isLittle ? odd : even;
    const low = isLittle ? even : odd;
    const zeroBits = evenLow || oddLow ? low.zeroBits : low.zeroBits % 8;
    const isLeft = zeroBits > 0;
    const isSame = base.word === 'int16';
    return {
      ...base,
      word: 'int16',
      byteOrder: isLittle ? 'little' : 'big',
      bits: isLeft ? 16 - zeroBits : isSame && base.align === 'right' ? base.bits : 16,
      align: isLeft ? 'left' : 'right',
      numberFormat:
        isSame && !isLeft && base.align === 'right' && base.bits < 16
          ? signOf(high, base)
          : formatOf(high.centre, isSame ? base.numberFormat : 'twosComplement'),
    };
  }
  if (Math.max(even.entropy, odd.entropy) < 7.9)
    return {
      ...base,
      word: 'int8',
      bits: 8,
      align: 'right',
      numberFormat: formatOf(
        (even.centre + odd.centre) / 2,
        base.word === 'int8' ? base.numberFormat : 'twosComplement',
      ),
    };
  return base;
}

/**
 * True for the low byte of left-aligned words: low bits of it, or all of it, are never set. Expected right-aligned offset binary of 8 bits
 * never sets its high byte.
 */
function isLowByte(one: ByteFacts, other: ByteFacts, base: CaptureLayout): boolean {
  if (other.zeroBits > 0 || one.zeroBits === 0) return false;
  const isHighEmpty =
    base.word === 'int16' && base.align === 'right' && base.bits === 8 && base.numberFormat === 'offsetBinary';
  return one.zeroBits < 8 || !isHighEmpty;
}

/** Share of words that are numbers a receiver would write: 0, or between 2^−60 and 2^20. */
function floatShare(bytes: Uint8Array, isLittle: boolean): number {
  const count = Math.floor(bytes.length / 4);
  if (count === 0) return 0;
  const view = new DataView(bytes.buffer, bytes.byteOffset, 4 * count);
  let plausible = 0;
  let zeros = 0;
  for (let i = 0; i < count; i++) {
    const bits = view.getUint32(4 * i, isLittle);
    const exponent = (bits >>> 23) & 0xff;
    if (bits << 1 === 0) zeros++;
    else if (exponent >= 127 - 60 && exponent <= 127 + 20) plausible++;
  }
  return zeros === count ? 0 : (plausible + zeros) / count;
}

/** Right-aligned words of fewer than 16 bits: below zero the high byte is full of ones, in offset binary it holds the top bits alone. */
function signOf(high: ByteFacts, base: CaptureLayout): CaptureLayout['numberFormat'] {
  if (base.numberFormat === 'offsetBinary')
    return high.largest < 1 << (base.bits - 8) ? 'offsetBinary' : 'twosComplement';
  return formatOf(high.centre, base.numberFormat);
}

interface ByteFacts {
  /** Bits of Shannon entropy of the byte, 0…8. */
  entropy: number;
  /** Low bits that are 0 in each of them: 8 where all bytes are 0. */
  zeroBits: number;
  /** Mean cosine of the byte as an angle: 1 around 0, −1 around 128. */
  centre: number;
  largest: number;
}

function byteFacts(bytes: Uint8Array, first: number): ByteFacts {
  const counts = new Float64Array(256);
  let all = 0;
  let total = 0;
  for (let i = first; i < bytes.length; i += 2) {
    counts[bytes[i]!]!++;
    all |= bytes[i]!;
    total++;
  }
  let entropy = 0;
  let centre = 0;
  for (let byte = 0; byte < 256; byte++) {
    const share = counts[byte]! / Math.max(1, total);
    if (share > 0) entropy -= share * (log10(share) / 0.3010299956639812);
    // a triangle does for a cosine
    centre += share * (1 - Math.abs(((byte + 128) % 256) - 128) / 64);
  }
  let largest = 255;
  while (largest > 0 && counts[largest] === 0) largest--;
  let zeroBits = 0;
  while (zeroBits < 8 && ((all >> zeroBits) & 1) === 0) zeroBits++;
  return { entropy, zeroBits, centre, largest };
}

function formatOf(centre: number, otherwise: CaptureLayout['numberFormat']): CaptureLayout['numberFormat'] {
  if (Math.abs(centre) < 0.1) return otherwise;
  return centre < 0 ? 'offsetBinary' : 'twosComplement';
}
