import { createRootsOfUnity, writeUnitOfFraction } from '../math/turns';
import type { Sequence } from '../types';
import { createBitSource, type BitSource } from './bitSource';

/** An endless complex sequence. */
export interface ValueSequence {
  /** True when every value is real (its imaginary parts are exact zeros). */
  readonly isReal: boolean;
  /** Multiplies `count` interleaved values at out[2·at…] by the sequence at index, index + step, … (index ≥ 0, step 0 or 1). */
  multiplyInto(index: number, step: 0 | 1, count: number, out: Float64Array, at: number): void;
}

const TABLE_MOST = 131072;

function fromPoints(points: Float64Array, phaseOf: (index: number) => number): ValueSequence {
  return {
    isReal: false,
    multiplyInto(index, step, count, out, at) {
      for (let i = 0; i < count; i++) {
        const from = 2 * phaseOf(index + step * i);
        const to = 2 * (at + i);
        const re = out[to]!;
        const im = out[to + 1]!;
        const sRe = points[from]!;
        const sIm = points[from + 1]!;
        out[to] = re * sRe - im * sIm;
        out[to + 1] = re * sIm + im * sRe;
      }
    },
  };
}

/** e^{j2π·numeratorOf(index)/denominator}, by a table of roots or, where that would be large, one by one. */
function fromPhases(denominator: number, numeratorOf: (index: number) => number): ValueSequence {
  if (denominator <= TABLE_MOST) return fromPoints(createRootsOfUnity(denominator), numeratorOf);
  const unit = new Float64Array(2);
  return {
    isReal: false,
    multiplyInto(index, step, count, out, at) {
      for (let i = 0; i < count; i++) {
        writeUnitOfFraction(numeratorOf(index + step * i), denominator, unit, 0);
        const to = 2 * (at + i);
        const re = out[to]!;
        const im = out[to + 1]!;
        out[to] = re * unit[0]! - im * unit[1]!;
        out[to + 1] = re * unit[1]! + im * unit[0]!;
      }
    },
  };
}

function fromSigns(signOf: (index: number) => number): ValueSequence {
  return {
    isReal: true,
    multiplyInto(index, step, count, out, at) {
      for (let i = 0; i < count; i++) {
        const sign = signOf(index + step * i);
        out[2 * (at + i)]! *= sign;
        out[2 * (at + i) + 1]! *= sign;
      }
    },
  };
}

function goldQpsk(bits: BitSource): ValueSequence {
  const part = 1 / Math.sqrt(2);
  const points = Float64Array.of(part, part, part, -part, -part, part, -part, -part);
  return fromPoints(points, (index) => 2 * bits.bit(2 * index) + bits.bit(2 * index + 1));
}

/** (index mod cycle), also for indices beyond 2^31. */
function cyclic(index: number, cycle: number): number {
  return index % cycle;
}

/**
 * The values of a pilot's or tone's factor; unit magnitude but for `listed`, which is taken as written.
 * Constant 1; alternating (−1)^i; register 1 − 2b(i); Gold as TS 38.211 5.2.1 with BPSK 1 − 2c(i) or QPSK of c(2i), c(2i+1);
 * Zadoff–Chu: Chu 1972; Newman phases πi²/count; Schroeder phases −πi(i+1)/count. Phases are exact fractions of a turn, reduced as whole
 * numbers, for indices up to 2^53. Tables are its own; the sequence given is not kept.
 */
export function createSequence(sequence: Sequence): ValueSequence {
  switch (sequence.kind) {
    case 'constant':
      return { isReal: true, multiplyInto: () => undefined };
    case 'alternating':
      return fromSigns((index) => 1 - 2 * (index % 2));
    case 'pn': {
      const bits = createBitSource(sequence);
      return fromSigns((index) => 1 - 2 * bits.bit(index));
    }
    case 'gold': {
      const bits = createBitSource({ kind: 'gold', cInit: sequence.cInit });
      return sequence.points === 'qpsk' ? goldQpsk(bits) : fromSigns((index) => 1 - 2 * bits.bit(index));
    }
    case 'zadoffChu': {
      // −π·root·m(m + odd)/length as turns over 2·length; every product stays below 2^53
      const { length, root, shift } = sequence;
      const odd = length % 2;
      return fromPhases(2 * length, (index) => {
        const m = cyclic(index + shift, length);
        const turns = (((m * (m + odd)) % (2 * length)) * (root % (2 * length))) % (2 * length);
        return turns === 0 ? 0 : 2 * length - turns;
      });
    }
    case 'newman': {
      const whole = 2 * sequence.count;
      return fromPhases(whole, (index) => (cyclic(index, whole) * cyclic(index, whole)) % whole);
    }
    case 'schroeder': {
      const whole = 2 * sequence.count;
      return fromPhases(whole, (index) => {
        const turns = (cyclic(index, whole) * (cyclic(index, whole) + 1)) % whole;
        return turns === 0 ? 0 : whole - turns;
      });
    }
    case 'listed': {
      const points = Float64Array.from(sequence.points.flat());
      const length = sequence.points.length;
      return fromPoints(points, (index) => cyclic(index, length));
    }
  }
}

/** One value of a sequence at `index` ≥ 0 as [re, im], for tables and checks. */
export function sequenceValue(sequence: ValueSequence, index: number): [re: number, im: number] {
  const out = Float64Array.of(1, 0);
  sequence.multiplyInto(index, 0, 1, out, 0);
  return [out[0]!, out[1]!];
}
