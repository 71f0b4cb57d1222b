import { amplitudeOfDecibels, exponential, log10, logarithm, powerOfDecibels } from '@/lib/synth';

function ulps(value: number, reference: number): number {
  if (value === reference) return 0;
  return Math.abs(value - reference) / 2 ** (Math.max(Math.floor(Math.log2(Math.abs(reference))), -1022) - 52);
}

// Source of every comparison: the engine's own library (itself below one unit of error).
describe('own elementary functions', () => {
  it('exponential is within one unit', () => {
    let worst = 0;
    for (let i = -70000; i <= 70000; i++) worst = Math.max(worst, ulps(exponential(i / 100.7), Math.exp(i / 100.7)));
    expect(worst).toBeLessThanOrEqual(1);
    expect(exponential(0)).toBe(1);
    expect(exponential(710)).toBe(Infinity);
    expect(exponential(-746)).toBe(0);
    expect(exponential(-744)).toBeGreaterThan(0);
    expect(exponential(NaN)).toBeNaN();
  });

  it('logarithm is within one unit', () => {
    let worst = 0;
    let worstDecimal = 0;
    for (let i = 1; i <= 200000; i++) {
      const x = i * 1e-5 * 2 ** ((i % 81) - 40);
      worst = Math.max(worst, ulps(logarithm(x), Math.log(x)));
      worstDecimal = Math.max(worstDecimal, ulps(log10(x), Math.log10(x)));
    }
    expect(worst).toBeLessThanOrEqual(1);
    // the engine's decimal logarithm is itself up to 1.3 units off (against 160-bit arithmetic; ours 0.51)
    expect(worstDecimal).toBeLessThanOrEqual(2);
  });

  it('logarithm is accurate close to one and below the normal range', () => {
    for (const x of [1 + 2 ** -52, 1 - 2 ** -53, 1.0000001, 0.9999999, 5e-324, 1e-310, 1.7e308]) {
      expect(ulps(logarithm(x), Math.log(x))).toBeLessThanOrEqual(1);
    }
    expect(logarithm(1)).toBe(0);
    expect([logarithm(0), log10(0)]).toEqual([-Infinity, -Infinity]);
    expect([logarithm(-1), log10(NaN)]).toEqual([NaN, NaN]);
  });

  it('decimal logarithms of powers of ten are exact', () => {
    for (let k = -22; k <= 22; k++)
      expect(Math.abs(log10(Number(`1e${k}`)) - k)).toBeLessThanOrEqual(2 ** -51 * Math.abs(k));
  });

  it('decibels become amplitude and power', () => {
    for (let db = -200; db <= 200; db += 0.37) {
      expect(Math.abs(amplitudeOfDecibels(db) / 10 ** (db / 20) - 1)).toBeLessThan(4e-15);
      expect(Math.abs(powerOfDecibels(db) / amplitudeOfDecibels(db) ** 2 - 1)).toBeLessThan(4e-16 * 1.5);
    }
    expect(amplitudeOfDecibels(0)).toBe(1);
    expect(amplitudeOfDecibels(20)).toBe(10);
    expect(amplitudeOfDecibels(-60)).toBe(0.001);
  });
});
