import { logarithm } from '../math/exponential';
import { writeUnitOfTurns } from '../math/turns';

/** A repeatable stream of numbers. */
export interface NoiseSource {
  /** A number in 0…1 (1 left out) of 53 bits. */
  uniform(): number;
  /** Writes a complex normal number of mean 0 and E|z|² = 1 to out[at], out[at + 1]. */
  normal(out: Float64Array, at: number): void;
}

/**
 * Random numbers from a seed (0…2^32−1), the same on every machine. Sources: the register xoshiro128** of Blackman and Vigna, "Scrambled
 * linear pseudorandom number generators", 2018 (constants from memory); Box and Muller, 1958.
 */
export function createNoise(seed: number): NoiseSource {
  // the state from the seed by a counter and a mixer, so that neighbouring seeds share nothing
  const state = new Uint32Array(4);
  let counter = seed >>> 0;
  for (let i = 0; i < 4; i++) {
    counter = (counter + 0x9e3779b9) >>> 0;
    let mixed = Math.imul(counter ^ (counter >>> 16), 0x85ebca6b);
    mixed = Math.imul(mixed ^ (mixed >>> 13), 0xc2b2ae35);
    state[i] = (mixed ^ (mixed >>> 16)) >>> 0;
  }
  const turned = (value: number, by: number): number => ((value << by) | (value >>> (32 - by))) >>> 0;
  const next = (): number => {
    const result = Math.imul(turned(Math.imul(state[1]!, 5), 7), 9) >>> 0;
    const shifted = state[1]! << 9;
    state[2]! ^= state[0]!;
    state[3]! ^= state[1]!;
    state[1]! ^= state[2]!;
    state[0]! ^= state[3]!;
    state[2]! ^= shifted;
    state[3] = turned(state[3]!, 11);
    return result;
  };
  const uniform = (): number => ((next() >>> 5) * 67108864 + (next() >>> 6)) / 9007199254740992;
  return {
    uniform,
    normal(out, at) {
      const radius = Math.sqrt(-logarithm(1 - uniform()));
      writeUnitOfTurns(uniform(), 0, out, at);
      out[at] = out[at]! * radius;
      out[at + 1] = out[at + 1]! * radius;
    },
  };
}
