import { createSequence, sequenceValue, type Sequence } from '@/lib/synth';
import { describeCheck, testCheck, testChecks } from '../../../../helpers/checks';
import { directTransform, unit } from '../../../../helpers/directTransform';

const values = (sequence: Sequence, start: number, count: number): [number, number][] => {
  const made = createSequence(sequence);
  return Array.from({ length: count }, (_, i) => sequenceValue(made, start + i));
};

function expectClose(found: [number, number][], wanted: [number, number][], tolerance: number): void {
  expect(found.length).toBe(wanted.length);
  wanted.forEach(([re, im], i) => {
    expect(Math.abs(found[i]![0] - re)).toBeLessThanOrEqual(tolerance);
    expect(Math.abs(found[i]![1] - im)).toBeLessThanOrEqual(tolerance);
  });
}

interface ZcCheck {
  first4: [number, number][];
  papr_16x_db: number;
}
describeCheck<Record<string, ZcCheck>>('th.zc', (check) => {
  it.each(Object.entries(check.expected))('%s', (name, expected) => {
    const [length, root] = name.replace('N', '').split('.u').map(Number) as [number, number];
    const chu = values({ kind: 'zadoffChu', length, root, shift: 0 }, 0, length);
    expectClose(chu.slice(0, 4), expected.first4, 1e-9);
    for (const [re, im] of chu) expect(Math.abs(re * re + im * im - 1)).toBeLessThan(1e-14);
    // zero cyclic autocorrelation and a flat transform at a few places
    for (const lag of [1, 2, length >> 1, length - 1]) {
      let re = 0;
      let im = 0;
      for (let i = 0; i < length; i++) {
        const [aRe, aIm] = chu[i]!;
        const [bRe, bIm] = chu[(i + lag) % length]!;
        re += aRe * bRe + aIm * bIm;
        im += aIm * bRe - aRe * bIm;
      }
      expect(Math.hypot(re, im)).toBeLessThan(1e-9 * length);
    }
    // the sequence's own spectrum on bins 0…N−1, interpolated sixteenfold
    const spectrum = directTransform(Float64Array.from(chu.flat()), -1);
    const table = Float64Array.from(Array.from({ length: 16 * length }, (_, i) => unit(i, 16 * length)).flat());
    let peak = 0;
    for (let n = 0; n < 16 * length; n++) {
      let re = 0;
      let im = 0;
      for (let k = 0; k < length; k++) {
        const root = 2 * ((k * n) % (16 * length));
        re += spectrum[2 * k]! * table[root]! - spectrum[2 * k + 1]! * table[root + 1]!;
        im += spectrum[2 * k]! * table[root + 1]! + spectrum[2 * k + 1]! * table[root]!;
      }
      peak = Math.max(peak, (re * re + im * im) / (length * length));
    }
    expect(Math.abs(10 * Math.log10(peak) - expected.papr_16x_db)).toBeLessThan(1e-9);
  });
});

describe('Zadoff–Chu', () => {
  const ids = ['ts36211.pss.25', 'ts36211.pss.29', 'ts36211.pss.34'];
  testChecks<{ d: [number, number][] }>(ids, ({ id, expected }) => {
    const u = Number(id.split('.')[2]);
    // n = 0…30 as they are, n = 31…61 skip the middle one (TS 36.211 6.11.1.1); the fixture errs by its own roundings
    const chu = values({ kind: 'zadoffChu', length: 63, root: u, shift: 0 }, 0, 63);
    expectClose([...chu.slice(0, 31), ...chu.slice(32)], expected.d, 1e-11);
  });

  it('shifts cyclically and stays exact for the longest and large indices', () => {
    const plain = values({ kind: 'zadoffChu', length: 139, root: 5, shift: 0 }, 10, 5);
    expect(values({ kind: 'zadoffChu', length: 139, root: 5, shift: 7 }, 3, 5)).toEqual(plain);
    expect(values({ kind: 'zadoffChu', length: 139, root: 5, shift: 0 }, 10 + 139 * 15000000, 5)).toEqual(plain);
    const [found] = values({ kind: 'zadoffChu', length: 65521, root: 65520, shift: 65520 }, 0, 1);
    const turns = Number((BigInt(65520) * BigInt(65520) * BigInt(65521)) % BigInt(2 * 65521));
    const [c, s] = unit(turns, 2 * 65521);
    expectClose([found!], [[c, -s]], 1e-15);
  });
});

describe('binary sequences of synchronization signals', () => {
  const minus = (found: [number, number][]): string => found.map(([re]) => (re < 0 ? '1' : '0')).join('');
  testChecks<{ bits_1_is_minus: string }>(['ts38211.pss.0', 'ts38211.pss.1', 'ts38211.pss.2'], ({ id, expected }) => {
    const shift = 43 * Number(id.split('.')[2]);
    const found = values({ kind: 'pn', stages: 7, taps: [3, 7], seed: 0b1110110, inverted: false }, shift, 127);
    expect(minus(found)).toBe(expected.bits_1_is_minus);
  });

  const secondary = ['ts38211.sss.0', 'ts38211.sss.17', 'ts38211.sss.500', 'ts38211.sss.1007'];
  testChecks<{ bits_1_is_minus: string }, { m0: number; m1: number }>(secondary, ({ expected, input }) => {
    const first = values({ kind: 'pn', stages: 7, taps: [3, 7], seed: 1, inverted: false }, input.m0, 127);
    const second = values({ kind: 'pn', stages: 7, taps: [6, 7], seed: 1, inverted: false }, input.m1, 127);
    const product = first.map(([re], i): [number, number] => [re * second[i]![0], 0]);
    expect(minus(product)).toBe(expected.bits_1_is_minus);
  });

  testCheck<{ polarity: number[] }>('ieee80211.pilots', ({ expected }) => {
    const found = values({ kind: 'pn', stages: 7, taps: [4, 7], seed: 0b1110000, inverted: false }, 0, 254);
    expect(found.map(([re]) => re)).toEqual([...expected.polarity, ...expected.polarity]);
  });
});

describe('other sequences', () => {
  it('are what their formulas say', () => {
    expect(values({ kind: 'constant' }, 3, 2)).toEqual([
      [1, 0],
      [1, 0],
    ]);
    expect(values({ kind: 'alternating' }, 3, 3).map(([re]) => re)).toEqual([-1, 1, -1]);
    expect(
      values(
        {
          kind: 'listed',
          points: [
            [1, 2],
            [3, -4],
          ],
        },
        1,
        3,
      ),
    ).toEqual([
      [3, -4],
      [1, 2],
      [3, -4],
    ]);
    expectClose(
      values({ kind: 'newman', count: 48 }, 5, 3),
      [25, 36, 49].map((square) => unit(square, 96)),
      1e-15,
    );
    expectClose(
      values({ kind: 'schroeder', count: 7 }, 2, 3),
      [6, 12, 20].map((product): [number, number] => {
        const [c, s] = unit(product, 14);
        return [c, -s];
      }),
      1e-15,
    );
    // beyond the table, the same phases one by one
    expectClose(
      values({ kind: 'newman', count: 100000 }, 123456, 1),
      [unit((123456 * 123456) % 200000, 200000)],
      1e-15,
    );
  });
});
