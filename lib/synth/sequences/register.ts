/**
 * A linear feedback shift register read 32 bits at a time. Squaring the recurrence b(t) = Σ b(t − tap) over GF(2) five
 * times gives b(t) = Σ b(t − 32·tap): the 32-bit words of the sequence obey the register's own recurrence.
 * Source: Golomb, Shift Register Sequences, 1967 (f(x)² = f(x²) over GF(2)).
 */
export interface WordRegister {
  /**
   * Writes `count` packed words from word number `first` on to out[at…]: word i holds the bits 32i…32i+31, the first as
   * the most significant. Reading on from where the last call ended is fast, anything else costs a jump.
   */
  readWords(first: number, count: number, out: Uint32Array, at: number): void;
}

/** x^power modulo the register's polynomial, as a mask: bit i stands for b(i). power ≥ 0, whole, ≤ 2^53. */
function residueOf(power: number, stages: number, taps: readonly number[]): number {
  // x^stages = Σ x^(stages − tap): what a carry out of the top position folds back to
  let fold = 0;
  for (const tap of taps) fold |= 1 << (stages - tap);
  const top = stages - 1;
  const mask = stages === 31 ? 0x7fffffff : (1 << stages) - 1;
  const timesX = (value: number): number => {
    const carry = (value >>> top) & 1;
    return ((value << 1) & mask) ^ (carry ? fold : 0);
  };
  let result = 1;
  const binary = power.toString(2);
  for (let i = 0; i < binary.length; i++) {
    let squared = 0;
    for (let bit = top; bit >= 0; bit--) {
      squared = timesX(squared);
      if ((result >>> bit) & 1) squared ^= result;
    }
    result = binary.charCodeAt(i) === 49 ? timesX(squared) : squared;
  }
  return result;
}

function parity(value: number): number {
  let x = value ^ (value >>> 16);
  x ^= x >>> 8;
  x ^= x >>> 4;
  return (0x6996 >>> (x & 15)) & 1;
}

/**
 * A register of 2…31 `stages`; `taps` ascending and distinct, the last being `stages`; bit i of `seed` is output bit i.
 * A seed of 0 gives zeros.
 */
export function createWordRegister(stages: number, taps: readonly number[], seed: number): WordRegister {
  const state = new Uint32Array(stages); // the last `stages` words before word number `next`
  let next = -1;

  /** Fills `state` with the words first…first+stages−1, bit by bit. */
  function jump(first: number): void {
    let window = 0; // bit i: b(t + i)
    if (first === 0) window = seed;
    else {
      // b(t + i) for i < stages: the residue of x^t, then times x each
      const residues = residueOf(32 * first, stages, taps);
      window = windowAt(residues);
    }
    for (let word = 0; word < stages; word++) {
      let packed = 0;
      for (let bit = 0; bit < 32; bit++) {
        packed = (packed << 1) | (window & 1);
        let fresh = 0;
        for (const tap of taps) fresh ^= window >>> (stages - tap);
        window = (window >>> 1) | ((fresh & 1) << (stages - 1));
      }
      state[word] = packed;
    }
    next = first + stages;
  }

  function windowAt(residueOfStart: number): number {
    let window = 0;
    let residue = residueOfStart;
    let fold = 0;
    for (const tap of taps) fold |= 1 << (stages - tap);
    const mask = stages === 31 ? 0x7fffffff : (1 << stages) - 1;
    for (let i = 0; i < stages; i++) {
      window |= parity(residue & seed) << i;
      const carry = (residue >>> (stages - 1)) & 1;
      residue = ((residue << 1) & mask) ^ (carry ? fold : 0);
    }
    return window;
  }

  function run(count: number, out: Uint32Array, at: number): void {
    const head = Math.min(count, stages);
    for (let i = 0; i < head; i++) {
      let word = 0;
      for (const tap of taps) word ^= i < tap ? state[stages + i - tap]! : out[at + i - tap]!;
      out[at + i] = word;
    }
    const end = at + count;
    if (taps.length === 2) {
      const near = taps[0]!;
      for (let i = at + head; i < end; i++) out[i] = out[i - near]! ^ out[i - stages]!;
    } else {
      for (let i = at + head; i < end; i++) {
        let word = 0;
        for (let t = 0; t < taps.length; t++) word ^= out[i - taps[t]!]!;
        out[i] = word;
      }
    }
    if (count >= stages) state.set(out.subarray(end - stages, end));
    else {
      state.copyWithin(0, count);
      state.set(out.subarray(at, end), stages - count);
    }
    next += count;
  }

  return {
    readWords(first, count, out, at) {
      let offset = at;
      let left = count;
      if (next !== first) {
        jump(first);
        const ready = Math.min(stages, left);
        out.set(state.subarray(0, ready), offset);
        offset += ready;
        left -= ready;
        if (ready < stages) {
          next = -1; // the state is ahead of what was read
          return;
        }
      }
      if (left > 0) run(left, out, offset);
    },
  };
}
