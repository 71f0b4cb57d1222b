import type { ToneInk } from '@/lib/synth';
import { createSynthesis } from '@/lib/synth';
import { NULL_INK, smallContent } from '../../../../helpers/content';
import { unit } from '../../../../helpers/directTransform';

const tone: ToneInk = {
  inkId: 'k1',
  name: 'carrier',
  role: 'tone',
  powerDb: 0,
  value: { factors: [], phaseDeg: 0, continuous: true },
};
/** A constant 1/8 (DC of a 64-bin transform), turned by the offset. */
const carrier = smallContent({
  tray: [NULL_INK, tone],
  symbolCount: 100,
  grid: { rows: [[32, 0, 1, 1, 31, 0]], rowOfSymbol: new Array<number>(100).fill(0) },
  subcarrierSpacingHz: [312500, 1],
});

/** Samples from `first` on of the carrier repeated 65536 times. */
function samplesAt(frequencyOffsetHz: number, first: number, count: number): Float64Array {
  const synthesis = createSynthesis({
    ...carrier,
    frequencyOffsetHz,
    timing: { mode: 'loop', repeats: 65536, gapSamples: 0, padSamples: 0 },
  });
  const block = new Float64Array(2 * 6400);
  for (let at = 0; at + 6400 <= first; at += 6400) synthesis.read(block);
  synthesis.read(block.subarray(0, 2 * (first % 6400)));
  const out = new Float64Array(2 * count);
  synthesis.read(out);
  return out;
}

describe('the frequency offset', () => {
  it.each([137300, -137300, 1, -9999999])('of %i Hz is exact a million samples on', (offset) => {
    const first = 6400 * 200 + 17;
    const found = samplesAt(offset, first, 3000);
    let worst = 0;
    for (let i = 0; i < 3000; i++) {
      const turns = (BigInt(offset) * BigInt(first + i)) % 20000000n;
      const [c, s] = unit(Number(turns), 20000000);
      worst = Math.max(worst, Math.abs(found[2 * i]! - c / 8), Math.abs(found[2 * i + 1]! - s / 8));
    }
    // −310 dB of 1/8 is 4e-17; a plain double product errs a thousand times as much here
    expect(20 * Math.log10(8 * worst)).toBeLessThan(-310);
  });

  it('takes the double as it is written, not a rounded fraction', () => {
    // 0.1 Hz as a double is not a tenth: its own binary fraction counts
    const first = 6400 * 100;
    const found = samplesAt(0.1, first, 1);
    const numerator = 3602879701896397n * BigInt(first); // 0.1 = 3602879701896397 / 2^55
    const whole = 2n ** 55n * 20000000n;
    const turns = Number(((numerator % whole) * 2n ** 60n) / whole) / 2 ** 60;
    expect(Math.abs(found[0]! - Math.cos(2 * Math.PI * turns) / 8)).toBeLessThan(1e-16);
    expect(Math.abs(found[1]! - Math.sin(2 * Math.PI * turns) / 8)).toBeLessThan(1e-16);
  });
});
