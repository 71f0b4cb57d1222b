import { decadeTicks, linearTicks, megahertzTicks, subcarrierTicks, symbolTicks } from '@/lib/drawing/axis';
import { minMaxLine, minMaxPolygon, niceCeiling, plotY } from '@/lib/drawing/plot';

const minus = '\u2212';

describe('axes', () => {
  it('name subcarriers with DC in the middle of its cell', () => {
    const ticks = subcarrierTicks({ from: 0, to: 2048, lengthPx: 782 }, 2048);
    const named = ticks.filter(({ label }) => label !== '');
    expect(named.map(({ label }) => label)).toEqual([
      `${minus}1000`,
      `${minus}800`,
      `${minus}600`,
      `${minus}400`,
      `${minus}200`,
      'DC',
      '200',
      '400',
      '600',
      '800',
      '1000',
    ]);
    const dc = named.find(({ isZero }) => isZero)!;
    expect(dc.atPx).toBeCloseTo((1024.5 / 2048) * 782, 9);
    expect(ticks.length).toBeGreaterThan(named.length);
  });

  it('never name a part of a subcarrier, nor one beyond the band', () => {
    const close = subcarrierTicks({ from: 30, to: 34, lengthPx: 780 }, 64);
    expect(close.map(({ value }) => value)).toEqual([-2, -1, 0, 1]);
    expect(
      subcarrierTicks({ from: -10, to: 20, lengthPx: 400 }, 16).every(({ value }) => value >= -8 && value <= 7),
    ).toBe(true);
  });

  it('put MHz over the subcarriers they belong to', () => {
    const span = { from: 0, to: 2048, lengthPx: 782 };
    const mhz = megahertzTicks(span, 2048, 15000);
    const six = mhz.find(({ value }) => value === 6)!;
    const subcarrier400 = subcarrierTicks(span, 2048).find(({ value }) => value === 400)!;
    expect(six.atPx).toBeCloseTo(subcarrier400.atPx, 9);
    expect(mhz.find(({ value }) => value === -6)!.label).toBe(`${minus}6`);
    expect(megahertzTicks({ from: 1490, to: 1500, lengthPx: 360 }, 2048, 15000)[0]!.label).toMatch(/^\d\.\d{2,3}$/);
  });

  it('thin symbols, and stand in the middle of their rows', () => {
    expect(symbolTicks({ from: 0, to: 14, lengthPx: 336 }, 14).map(({ label }) => label)).toHaveLength(14);
    const thinned = symbolTicks({ from: 0, to: 140, lengthPx: 336 }, 140);
    expect(thinned.length).toBeLessThanOrEqual(19);
    expect(thinned[1]!.value - thinned[0]!.value).toBe(10);
    expect(symbolTicks({ from: 0, to: 14, lengthPx: 336 }, 14)[2]!.atPx).toBe(60);
  });

  it('name decades', () => {
    expect(decadeTicks(-5, 0, 100).map(({ label, atPx }) => [label, Math.round(atPx)])).toEqual([
      ['1', 0],
      ['10⁻¹', 20],
      ['10⁻²', 40],
      ['10⁻³', 60],
      ['10⁻⁴', 80],
      ['10⁻⁵', 100],
    ]);
    expect(linearTicks({ from: 8, to: 11.5, lengthPx: 100 }, 30).map(({ label }) => label)).toEqual([
      '8',
      '9',
      '10',
      '11',
    ]);
  });
});

describe('plots', () => {
  const scale = { from: 0, to: 2, heightPx: 100 };
  const min = Float32Array.from([0, 0.5, 0]);
  const max = Float32Array.from([1, 2, 0.5]);

  it('put values between the edges', () => {
    expect([0, 1, 2, 5, -1].map((value) => plotY(value, scale))).toEqual([100, 50, 0, 0, 100]);
    expect([0.9, 1.2, 3.1, 7, 95, 0].map(niceCeiling)).toEqual([1, 1.5, 4, 8, 100, 1]);
  });

  it('visit the least and the highest value of every column', () => {
    const line = minMaxLine(min, max, 4, scale);
    const ys = [...line].filter((_, i) => i % 2 === 1);
    expect(ys).toEqual([100, 50, 0, 75, 100, 75]);
    const polygon = minMaxPolygon(min, max, 4, scale);
    expect([...polygon].filter((_, i) => i % 2 === 1)).toEqual([50, 0, 75, 100, 75, 100]);
    expect([...polygon].filter((_, i) => i % 2 === 0)).toEqual([2, 6, 10, 10, 6, 2]);
  });
});
