import { interpolationOf, reconstructedPeak, type SampleSource } from '@/lib/synth';
import { createAnyTransform } from '@/lib/synth/measure/anyTransform';
import { dataInk, NULL_INK, pnStream, rowOf, smallContent } from '@/tests/helpers/content';
import { noise, normalPair, render, roundTo } from '@/tests/helpers/measures';

function sourceOf(samples: Float64Array): SampleSource {
  return {
    samples: samples.length / 2,
    read: (first, count, out) => out.set(samples.subarray(2 * first, 2 * (first + count))),
  };
}

/** |x(t)|² of the trigonometric polynomial through the samples, by a plain sum over its lines; −n/2 stays where it is. */
function brutePeak(samples: Float64Array): number {
  const n = samples.length / 2;
  const lines = Array.from({ length: n }, (_, bin) => {
    let re = 0;
    let im = 0;
    for (let i = 0; i < n; i++) {
      const angle = (-2 * Math.PI * ((bin * i) % n)) / n;
      re += samples[2 * i]! * Math.cos(angle) - samples[2 * i + 1]! * Math.sin(angle);
      im += samples[2 * i]! * Math.sin(angle) + samples[2 * i + 1]! * Math.cos(angle);
    }
    return [bin < Math.ceil(n / 2) ? bin : bin - n, re / n, im / n] as const;
  });
  let peak = 0;
  for (let eighth = 0; eighth < 8 * n; eighth++) {
    let re = 0;
    let im = 0;
    for (const [k, lineRe, lineIm] of lines) {
      const angle = (2 * Math.PI * ((k * eighth) % (8 * n))) / (8 * n);
      re += lineRe * Math.cos(angle) - lineIm * Math.sin(angle);
      im += lineRe * Math.sin(angle) + lineIm * Math.cos(angle);
    }
    peak = Math.max(peak, re * re + im * im);
  }
  return peak;
}

function randomSamples(count: number, seed: number): Float64Array {
  const random = noise(seed);
  return Float64Array.from({ length: 2 * count }, () => normalPair(random)[0]);
}

/** Painted over `share` of the clock, prefix of no special length. */
function ofdm(share: number, symbols: number, prefix = 9) {
  return smallContent({
    fftSize: 128,
    symbolCount: symbols,
    prefixSamples: [prefix],
    tray: [NULL_INK, dataInk(1, { constellation: '16qam', bitMap: 'ts38211', streamId: 's0' })],
    streams: [pnStream(0)],
    grid: {
      rows: [rowOf(128, (k) => (Math.abs(k) < 64 * share ? 1 : 0))],
      rowOfSymbol: new Array<number>(symbols).fill(0),
    },
  });
}

describe('exact reconstruction', () => {
  test.each([1, 2, 3, 60, 64, 97, 137, 181])('a loop of %i samples equals a plain sum over its lines', (count) => {
    const samples = randomSamples(count, count);
    const found = reconstructedPeak(sourceOf(samples), 'loop');
    expect(found.power / brutePeak(samples)).toBeCloseTo(1, 9);
    expect(found).toMatchObject({ method: 'exactTransforms', factor: 8, tapsEachSide: null });
  });

  test('a transform of prime size equals the plain sum', () => {
    const samples = randomSamples(331, 5);
    const out = new Float64Array(662);
    createAnyTransform(331)(samples, out);
    for (const k of [0, 1, 165, 330]) {
      let re = 0;
      for (let n = 0; n < 331; n++) {
        const angle = (-2 * Math.PI * ((k * n) % 331)) / 331;
        re += samples[2 * n]! * Math.cos(angle) - samples[2 * n + 1]! * Math.sin(angle);
      }
      expect(out[2 * k]).toBeCloseTo(re, 9);
    }
  });

  test('a burst has zeros around it: two equal samples make a sinc sum', () => {
    // x = δ[0] + δ[1]: between them 2·sinc(½) = 4/π
    const found = reconstructedPeak(sourceOf(Float64Array.of(1, 0, 1, 0)), 'burst');
    expect(Math.abs(found.power - (4 / Math.PI) ** 2)).toBeLessThan(1e-5);
    expect(found.atSample).toBe(0.5);
    // as a loop of two the same samples are a constant
    expect(reconstructedPeak(sourceOf(Float64Array.of(1, 0, 1, 0)), 'loop').power).toBeCloseTo(1, 12);
  });

  test('zeros have no peak; an empty file is refused', () => {
    expect(reconstructedPeak(sourceOf(new Float64Array(20)), 'loop').power).toBe(0);
    expect(reconstructedPeak(sourceOf(new Float64Array(20)), 'loop', 1).power).toBe(0);
    expect(() => reconstructedPeak(sourceOf(new Float64Array(0)), 'loop')).toThrow('sample');
  });

  test('it lies at or above the rendered peak of a loop, by little', () => {
    const content = ofdm(0.6, 6);
    const words = roundTo(render(content), 16);
    const found = reconstructedPeak(sourceOf(words), 'loop').power;
    const rendered = render(content, interpolationOf(1));
    let peak = 0;
    for (let n = 0; n < rendered.length; n += 2) peak = Math.max(peak, rendered[n]! ** 2 + rendered[n + 1]! ** 2);
    const db = 10 * Math.log10(found / peak);
    expect(db).toBeGreaterThan(-0.1);
    expect(db).toBeLessThan(1.5);
  });
});

describe('the filter of long files', () => {
  test.each(['loop', 'burst'] as const)('is within 0.1 dB of the exact method for a span of 80 %%, %s', (mode) => {
    for (let prefix = 3; prefix < 9; prefix++) {
      const samples = render(ofdm(0.8, 30, prefix));
      const exact = reconstructedPeak(sourceOf(samples), mode);
      const filtered = reconstructedPeak(sourceOf(samples), mode, 1);
      expect(filtered).toMatchObject({ method: 'polyphaseFilter', tapsEachSide: 64 });
      expect(Math.abs(10 * Math.log10(filtered.power / exact.power))).toBeLessThan(0.1);
      expect(Math.abs(filtered.atSample - exact.atSample)).toBeLessThanOrEqual(0.25);
    }
  });

  test('a peak at the wrap or between two blocks is found', () => {
    // a band-limited pulse, half a sample off the grid
    const pulse = (centre: number, count: number): Float64Array => {
      const samples = new Float64Array(2 * count);
      for (let n = 0; n < count; n++) {
        let u = (((n - centre) % count) + count) % count;
        if (u > count / 2) u -= count;
        samples[2 * n] = u === 0 ? 1 : Math.sin(0.7 * Math.PI * u) / (0.7 * Math.PI * u);
      }
      return samples;
    };
    for (const centre of [31.5, 63.5, 16383.5, -0.5, 39999.5]) {
      const found = reconstructedPeak(sourceOf(pulse(centre, 40000)), 'loop', 1);
      expect(found.power).toBeCloseTo(1, 3);
      expect(found.atSample).toBe((centre + 40000) % 40000);
    }
  });

  test('it reads in order and in small pieces', () => {
    const samples = randomSamples(40000, 3);
    const asked: number[] = [];
    reconstructedPeak(
      { samples: 40000, read: (first, count, out) => (asked.push(count), sourceOf(samples).read(first, count, out)) },
      'loop',
      1,
    );
    expect(Math.max(...asked)).toBeLessThanOrEqual(16384);
  });
});
