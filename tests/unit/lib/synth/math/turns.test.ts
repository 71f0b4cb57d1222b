import { createRootsOfUnity, sineCosine, sineCosineOfFraction, writeUnitOfTurns } from '@/lib/synth';

/** Distance in units of the last place of `reference`. */
function ulps(value: number, reference: number): number {
  if (value === reference) return 0;
  const exponent = Math.floor(Math.log2(Math.max(Math.abs(reference), Number.MIN_VALUE)));
  return Math.abs(value - reference) / 2 ** (Math.max(exponent, -1022) - 52);
}

describe('sine and cosine of turns', () => {
  it('are exact at quarter turns', () => {
    expect([0, 0.25, 0.5, 0.75, 1, -0.25].map((turns) => sineCosine(turns))).toEqual([
      { cosine: 1, sine: 0 },
      { cosine: 0, sine: 1 },
      { cosine: -1, sine: 0 },
      { cosine: 0, sine: -1 },
      { cosine: 1, sine: 0 },
      { cosine: 0, sine: -1 },
    ]);
  });

  // Source: the engine's own library. Math.sin(2πt) is itself off by the rounding of 2πt, so t stays below an eighth turn
  // where that is half a unit; its error and ours add.
  it('differ from the engine’s by at most two units in the last place below an eighth turn', () => {
    let worst = 0;
    for (let i = 1; i <= 20000; i++) {
      const turns = i / 160000;
      const { sine, cosine } = sineCosine(turns);
      worst = Math.max(worst, ulps(sine, Math.sin(2 * Math.PI * turns)), ulps(cosine, Math.cos(2 * Math.PI * turns)));
    }
    expect(worst).toBeLessThanOrEqual(2);
  });

  // Angles that a double holds exactly on both sides: numerators over 2^k of a *radian* are compared through their turns.
  it('are at most one unit from the engine’s for the angle nearest to the same real', () => {
    const out = new Float64Array(2);
    let worst = 0;
    for (let i = 1; i <= 5000; i++) {
      const angle = (i * Math.PI) / 4 / 5000;
      // turns = angle / 2π with its remainder, so that both sides see one angle
      const high = angle / (2 * Math.PI);
      const back = exactRemainder(angle, high);
      writeUnitOfTurns(high, back / (2 * Math.PI), out, 0);
      worst = Math.max(worst, ulps(out[0]!, Math.cos(angle)), ulps(out[1]!, Math.sin(angle)));
    }
    expect(worst).toBeLessThanOrEqual(1);
  });

  it('reduce large whole numbers exactly', () => {
    const far = sineCosineOfFraction(3 * 2 ** 50 + 1, 3 * 2 ** 20);
    const near = sineCosineOfFraction((3 * 2 ** 50 + 1) % (3 * 2 ** 20), 3 * 2 ** 20);
    expect(far).toEqual(near);
    expect(sineCosineOfFraction(-1, 12)).toEqual({ ...sineCosineOfFraction(11, 12) });
  });

  it('refuse a split that is not exact', () => {
    expect(() => sineCosineOfFraction(1, 2 ** 51)).toThrow(expect.objectContaining({ code: 'bad_index' }));
  });
});

/** angle − 2π·high to double precision, 2π as a double-double (from a table of π). */
function exactRemainder(angle: number, high: number): number {
  const scale = 2n ** 110n;
  const twoPi = 8156040833015188200833743081374136n; // ⌊2π · 2^110⌋
  const toFixed = (value: number): bigint => BigInt(Math.round(value * 2 ** 80)) * 2n ** 30n;
  // both are multiples of 2^-80 here: angles below 1, at least 1e-4
  return Number(toFixed(angle) - (twoPi * toFixed(high)) / scale) / 2 ** 110;
}

describe('roots of unity', () => {
  it('have the bits of the single values', () => {
    for (const count of [1, 2, 3, 4, 5, 8, 12, 20, 60, 64, 100, 2048, 6480]) {
      const roots = createRootsOfUnity(count);
      for (let i = 0; i < count; i++) {
        expect({ cosine: roots[2 * i], sine: roots[2 * i + 1] }).toEqual(sineCosineOfFraction(i, count));
      }
    }
  });

  it('sum to zero and have magnitude one', () => {
    for (const count of [3, 5, 16, 360, 2048]) {
      const roots = createRootsOfUnity(count);
      let re = 0;
      let im = 0;
      for (let i = 0; i < count; i++) {
        re += roots[2 * i]!;
        im += roots[2 * i + 1]!;
        expect(Math.hypot(roots[2 * i]!, roots[2 * i + 1]!)).toBeCloseTo(1, 15);
      }
      expect(Math.hypot(re, im)).toBeLessThan(1e-13);
    }
  });
});
