import { powerOfDecibels } from '../math/exponential';
import type { PowerHistogram } from './types';

/** Bins an octave of power: 5 bits of a single-precision mantissa, so that a bin is read off the number's own bits. */
const BINS_PER_OCTAVE = 32;
const LOWEST_OCTAVE = -40;
const OCTAVES = 64;
/** Bins of a whole histogram: 2^−40 … 2^24, all that powers of −60…20 dB on 16 to 16384 subcarriers can give. */
export const POWER_BINS = OCTAVES * BINS_PER_OCTAVE;

const FIRST_CODE = (127 + LOWEST_OCTAVE) * BINS_PER_OCTAVE;
// One number's two faces; written before each reading, so it carries nothing from call to call.
const asSingle = new Float32Array(1);
const asBits = new Uint32Array(asSingle.buffer);

/** The bin 0…POWER_BINS−1 of a power ≥ 0; what lies outside the range goes to the first or last bin. */
export function binOfPower(power: number): number {
  asSingle[0] = power;
  const bin = (asBits[0]! >>> 18) - FIRST_CODE;
  return bin < 0 ? 0 : bin >= POWER_BINS ? POWER_BINS - 1 : bin;
}

/** The least power of bin `bin` (exact): 2^octave · (1 + step/32). */
export function powerOfBin(bin: number): number {
  let value = 1 + (bin % BINS_PER_OCTAVE) / BINS_PER_OCTAVE;
  const octave = Math.floor(bin / BINS_PER_OCTAVE) + LOWEST_OCTAVE;
  for (let i = 0; i < octave; i++) value *= 2;
  for (let i = 0; i > octave; i--) value /= 2;
  return value;
}

/** An empty histogram of POWER_BINS bins. */
export function createHistogram(): PowerHistogram {
  return { counts: new Float64Array(POWER_BINS), total: 0 };
}

/** The power that stands `db` above `mean`. */
export function powerAbove(mean: number, db: number): number {
  return mean * powerOfDecibels(db);
}
