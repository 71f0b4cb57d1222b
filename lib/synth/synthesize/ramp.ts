import { writeUnitOfFraction } from '../math/turns';

/**
 * The rising half of a raised cosine: r[i] = ½(1 − cos(π(i + ½)/length)), i = 0…length−1, a new Float64Array; the falling
 * one is r[length − 1 − i], and both sum to 1 within a rounding.
 */
export function createRamp(length: number): Float64Array {
  const ramp = new Float64Array(length);
  const unit = new Float64Array(2);
  for (let i = 0; i < length; i++) {
    writeUnitOfFraction(2 * i + 1, 4 * length, unit, 0);
    ramp[i] = 0.5 * (1 - unit[0]!);
  }
  return ramp;
}
