import {
  formatFraction,
  formatInteger,
  formatNumber,
  formatQuantity,
  parseFraction,
  parseInteger,
  parseQuantity,
  quantityText,
} from '@/lib/drawing/quantities';

const minus = '\u2212';
const thin = '\u202f';

describe('reading quantities', () => {
  it.each([
    ['15k', 'Hz', 15000],
    ['30.72M', 'Hz', 30.72e6],
    ['0.3M', 'Hz', 300000],
    ['2e6', 'Hz', 2e6],
    ['0,3M', 'Hz', 300000],
    ['15 kHz', 'Hz', 15000],
    ['15khz', 'Hz', 15000],
    ['5 m', 's', 0.005],
    ['5 ms', 's', 0.005],
    ['5M', 's', 5e6],
    ['4.7 µs', 's', 4.7e-6],
    ['4.7us', 's', 4.7e-6],
    [`${minus}3,5 dB`, 'dB', -3.5],
    ['-12 dBm', 'dBm', -12],
    [`1${thin}048${thin}576`, '', 1048576],
    ['.5', '', 0.5],
    ['0.1', '', 0.1],
    ['1e-3', '', 0.001],
  ])('%s in %s', (text, unit, value) => {
    expect(parseQuantity(text, unit)).toEqual({ ok: true, value });
  });

  it.each(['', 'abc', '1.2.3', '1,2,3', '--1', '15 kk', '.', 'e6', '0x10', 'Infinity', 'NaN'])('refuses %p', (text) => {
    expect(parseQuantity(text, 'Hz').ok).toBe(false);
  });

  it('takes whole numbers alone where they are asked for', () => {
    expect(parseInteger('2k')).toEqual({ ok: true, value: 2000 });
    expect(parseInteger('2.5')).toMatchObject({ ok: false });
  });

  it.each([
    ['15k', [15000, 1]],
    ['31250/7', [31250, 7]],
    ['31250/7 Hz', [31250, 7]],
    ['312.5k', [312500, 1]],
    ['312.5', [625, 2]],
    ['3.125M/7', [3125000, 7]],
    ['0,1', [1, 10]],
    ['30000/2', [15000, 1]],
  ])('reads the fraction %s exactly', (text, value) => {
    expect(parseFraction(text)).toEqual({ ok: true, value });
  });

  it('refuses fractions that are none, below zero or too long', () => {
    for (const text of ['1/0', '0', '-5', '1/2/3', '1/', 'x', '0.1234567890123456789'])
      expect(parseFraction(text)).toMatchObject({ ok: false });
  });
});

describe('writing figures', () => {
  it('has a real minus and groups of three from five digits up', () => {
    expect(formatInteger(-1024)).toBe(`${minus}1024`);
    expect(formatInteger(61440)).toBe(`61${thin}440`);
    expect(formatInteger(-1048576)).toBe(`${minus}1${thin}048${thin}576`);
    expect(formatNumber(-0.001, 2)).toBe('0');
    expect(formatNumber(11.3, 2, true)).toBe('11.30');
  });

  it('keeps value and unit apart', () => {
    expect(formatQuantity(30.72e6, 'Hz')).toEqual({ value: '30.72', unit: 'MHz' });
    expect(formatQuantity(15000, 'Hz')).toEqual({ value: '15', unit: 'kHz' });
    expect(formatQuantity(0.001, 's')).toEqual({ value: '1', unit: 'ms' });
    expect(formatQuantity(4.6875e-6, 's', 3)).toEqual({ value: '4.69', unit: 'µs' });
    expect(formatQuantity(999999.7, 'Hz', 6)).toEqual({ value: '1', unit: 'MHz' });
    expect(formatQuantity(0, 'Hz')).toEqual({ value: '0', unit: 'Hz' });
    expect(formatQuantity(-31.24, 'dB', 1)).toEqual({ value: `${minus}31.2`, unit: 'dB' });
    expect(formatQuantity(89856, 'bits')).toEqual({ value: `89${thin}856`, unit: 'bits' });
    expect(quantityText(89.856e6, 'bit/s', 4)).toBe('89.86\u00a0Mbit/s');
  });

  it('writes a spacing as it is exactly', () => {
    expect(formatFraction([15000, 1])).toEqual({ value: '15', unit: 'kHz' });
    expect(formatFraction([31250, 7])).toEqual({ value: `31${thin}250/7`, unit: 'Hz' });
    expect(formatFraction([625, 2])).toEqual({ value: '312.5', unit: 'Hz' });
  });
});
