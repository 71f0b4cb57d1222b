import { SynthError } from '../errors';
import type { BitMap, Constellation } from '../types';

/** Bits a cell of the constellation carries: 1…12. */
export function bitsPerCell(constellation: Constellation): number {
  switch (constellation) {
    case 'bpsk':
    case 'pi2-bpsk':
      return 1;
    case 'qpsk':
      return 2;
    case '16qam':
      return 4;
    case '64qam':
      return 6;
    case '256qam':
      return 8;
    case '1024qam':
      return 10;
    case '4096qam':
      return 12;
  }
}

/** (1−2b0)[2^(h−1) + s·(1−2b1)[2^(h−2) + s·…]]: nested signs, s = −1 puts 0 bits inside, s = +1 outside. */
function nestedLevel(word: number, bits: number, side: number): number {
  let value = 0;
  for (let i = 0, size = 1; i < bits; i++, size *= 2) {
    const sign = 1 - 2 * ((word >> i) & 1);
    value = sign * (size + (i === 0 ? 0 : side * value));
  }
  return value;
}

/** Binary reflected Gray code upwards: 0…0 is the lowest level. */
function grayLevel(word: number, bits: number): number {
  let place = word;
  for (let shift = 1; shift < bits; shift <<= 1) place ^= place >> shift;
  return 2 * place - ((1 << bits) - 1);
}

function everySecondBit(word: number, bits: number, first: number): number {
  let picked = 0;
  for (let i = first; i < bits; i += 2) picked = (picked << 1) | ((word >> (bits - 1 - i)) & 1);
  return picked;
}

/** False for the pairs that a document cannot have: π/2-BPSK beside ts38211, en300744 beside QPSK, 16- and 64-QAM. */
export function isMapKnown(constellation: Constellation, bitMap: BitMap): boolean {
  if (constellation === 'pi2-bpsk') return bitMap === 'ts38211';
  if (bitMap === 'en300744') return constellation === 'qpsk' || constellation === '16qam' || constellation === '64qam';
  return true;
}

const known = new Map<string, Float64Array>(); // by constellation and map

/**
 * The points of a constellation: interleaved [I, Q, …], 2·2^b numbers in a new Float64Array; the index is the cell's bit
 * word with the first bit as its most significant. Mean power 1 (integers over √norm). π/2-BPSK: the points of an even
 * index i; an odd one turns them by +90°.
 * 4096-QAM (and 802.11's 256- and 1024-QAM) continue each map's own rule.
 * Throws SynthError `bad_content` for a pair that has no table.
 * Source: TS 38.211 5.1; IEEE Std 802.11 17.3.5.8; EN 300 744 4.3.5.
 */
export function pointsOf(constellation: Constellation, bitMap: BitMap): Float64Array {
  const name = `${constellation} ${bitMap}`;
  let points = known.get(name);
  if (points === undefined) known.set(name, (points = computePoints(constellation, bitMap)));
  return points.slice();
}

function computePoints(constellation: Constellation, bitMap: BitMap): Float64Array {
  if (!isMapKnown(constellation, bitMap)) throw new SynthError('bad_content', `No ${bitMap} map of ${constellation}.`);
  const bits = bitsPerCell(constellation);
  if (constellation === 'bpsk' && bitMap === 'ieee80211') return Float64Array.of(-1, 0, 1, 0);
  if (bits === 1) {
    const part = 1 / Math.sqrt(2);
    return Float64Array.of(part, part, -part, -part);
  }
  const half = bits / 2;
  const norm = Math.sqrt((2 * ((1 << bits) - 1)) / 3);
  const points = new Float64Array(2 << bits);
  for (let word = 0; word < 1 << bits; word++) {
    let re: number;
    let im: number;
    if (bitMap === 'ieee80211') {
      re = grayLevel(word >> half, half);
      im = grayLevel(word & ((1 << half) - 1), half);
    } else {
      const side = bitMap === 'ts38211' ? -1 : 1;
      re = nestedLevel(everySecondBit(word, bits, 0), half, side);
      im = nestedLevel(everySecondBit(word, bits, 1), half, side);
    }
    points[2 * word] = re / norm;
    points[2 * word + 1] = im / norm;
  }
  return points;
}
