import { createBitSource } from '../sequences/bitSource';
import type { PayloadSource, PnRegister } from '../types';

/** Steps that a register of an unusual polynomial is followed for. */
const STEPS_MOST = 1048576;

/**
 * Bits after which a payload source repeats itself for the first time (for patterns and uploads: their length). Null for a register whose
 * period is neither a divisor of 2^stages − 1 nor at most 2^20.
 */
export function periodOf(source: PayloadSource): number | null {
  switch (source.kind) {
    case 'zeros':
    case 'ones':
      return 1;
    case 'pattern':
      return source.bits.length;
    case 'uploaded':
      return source.bitCount;
    case 'gold':
      return 2147483647; // both of its registers have 31 stages, and 2^31 − 1 is prime
    case 'pn':
      return registerPeriod(source);
  }
}

/** Every primitive polynomial's sequence has the period 2^stages − 1, an irreducible one's a divisor of it (Golomb, 1967). */
function registerPeriod(register: PnRegister): number | null {
  const { stages } = register;
  const bits = createBitSource(register);
  const start = Array.from({ length: stages }, (_, i) => bits.bit(i));
  const returnsAfter = (count: number): boolean => start.every((bit, i) => bits.bit(count + i) === bit);
  let period = 1;
  for (let i = 0; i < stages; i++) period *= 2;
  period--;
  if (!returnsAfter(period)) return followedPeriod(register);
  for (const prime of primeFactors(period)) {
    while (period % prime === 0 && returnsAfter(period / prime)) period /= prime;
  }
  return period;
}

function primeFactors(value: number): number[] {
  const primes: number[] = [];
  let rest = value;
  for (let p = 2; p * p <= rest; p++) {
    if (rest % p !== 0) continue;
    primes.push(p);
    while (rest % p === 0) rest /= p;
  }
  if (rest > 1) primes.push(rest);
  return primes;
}

/** Step by step: the last tap is the number of stages, so the register runs in a plain circle. */
function followedPeriod({ stages, taps, seed }: PnRegister): number | null {
  let state = seed; // bit i is the output i steps on
  for (let step = 1; step <= STEPS_MOST; step++) {
    let fresh = 0;
    for (const tap of taps) fresh ^= state >>> (stages - tap);
    state = (state >>> 1) | ((fresh & 1) << (stages - 1));
    if (state === seed) return step;
  }
  return null;
}
