import { log10 } from '../../math/exponential';
import { isNpy, isWav, readNpyHead, readWavHead } from './containers';
import { plainLayout, type ByteSource, type CaptureLayout, type LayoutOutcome } from './captureLayout';

const HEAD_BYTES = 65536;
const PIECE_BYTES = 16384;
const PIECES = 16;
/** Bytes are looked at from here on: 8-bit words take even numbers, floats a multiple of eight. */
const STEP_BYTES = 64;
/** Of the words at either end of the scale. */
const RAILED_SHARE = 0.1;

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
  const railed = railedOrder(bytes);
  if (railed !== null && base.word !== 'int8')
    return { ...base, word: 'int16', bits: 16, align: 'right', numberFormat: 'twosComplement', byteOrder: railed };
  const marked = markedOrder(bytes, base);
  if (marked !== null) return { ...base, byteOrder: marked };
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

/** The order in which many 16-bit words stand at both ends of the scale, and none do in the other: of saturated words no byte is the quieter. */
function railedOrder(bytes: Uint8Array): CaptureLayout['byteOrder'] | null {
  let [lowLittle, highLittle, lowBig, highBig] = [0, 0, 0, 0];
  const words = Math.floor(bytes.length / 2);
  for (let i = 0; i < 2 * words; i += 2) {
    const little = bytes[i]! | (bytes[i + 1]! << 8);
    const big = bytes[i + 1]! | (bytes[i]! << 8);
    if (little === 0x7fff) highLittle++;
    else if (little === 0x8000 || little === 0x8001) lowLittle++;
    if (big === 0x7fff) highBig++;
    else if (big === 0x8000 || big === 0x8001) lowBig++;
  }
  const least = RAILED_SHARE * words;
  const isLittle = Math.min(lowLittle, highLittle) > least;
  const isBig = Math.min(lowBig, highBig) > least;
  return words === 0 || isLittle === isBig ? null : isLittle ? 'little' : 'big';
}

/**
 * The order of expected left-aligned words whose free low bits hold markers: those bits say less than the same bits of the high byte, while
 * the bits above them are as busy as a low byte's. Null where nothing says so.
 */
function markedOrder(bytes: Uint8Array, base: CaptureLayout): CaptureLayout['byteOrder'] | null {
  if (base.word !== 'int16' || base.align !== 'left' || base.bits >= 16 || base.bits <= 8) return null;
  const free = (1 << (16 - base.bits)) - 1;
  const [even, odd] = [byteFacts(bytes, 0), byteFacts(bytes, 1)];
  if (even.zeroBits > 0 || odd.zeroBits > 0) return null;
  const evenFree = byteFacts(bytes, 0, free).entropy;
  const oddFree = byteFacts(bytes, 1, free).entropy;
  const busy = 0.8 * (base.bits - 8);
  if (evenFree < oddFree - 0.35 && even.entropy - evenFree > busy) return 'little';
  if (oddFree < evenFree - 0.35 && odd.entropy - oddFree > busy) return 'big';
  return null;
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

/** Of every second byte, or of the bits of it that `mask` holds. */
function byteFacts(bytes: Uint8Array, first: number, mask = 0xff): ByteFacts {
  const counts = new Float64Array(256);
  let all = 0;
  let total = 0;
  for (let i = first; i < bytes.length; i += 2) {
    const byte = bytes[i]! & mask;
    counts[byte]!++;
    all |= byte;
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
