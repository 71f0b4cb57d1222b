import {
  createSynthesis,
  createTransform,
  createWordReader,
  createWordWriter,
  vectorStats,
  wordScale,
  type BenchProfile,
  type Sequence,
  type ToneInk,
  type WaveformContent,
} from '@/lib/synth';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describeCheck, testCheck } from '../../../helpers/checks';
import { NULL_INK, dataInk, factor, pilotInk, pnStream, rowOf, smallContent } from '../../../helpers/content';
import { renderSamples, renderWords } from '../../../helpers/renderWords';

const bench = (
  JSON.parse(readFileSync(join(__dirname, '../../fixtures/examples/int16.bench.json'), 'utf8')) as BenchProfile
).content;

function paprDb(content: WaveformContent): number {
  const stats = vectorStats(createSynthesis(content));
  return 20 * Math.log10(stats.samplePeak / stats.rms);
}

/** `count` carriers from k = 0 up with the phases of a sequence. */
function comb(fftSize: number, count: number, oversampling: number, sequence: Sequence): WaveformContent {
  return smallContent({
    fftSize,
    oversampling,
    tray: [NULL_INK, pilotInk(1, [factor(sequence)])],
    grid: {
      rows: [rowOf(fftSize, (k) => (k >= -Math.floor(count / 2) && k < Math.ceil(count / 2) ? 1 : 0))],
      rowOfSymbol: [0],
    },
  });
}

describeCheck<Record<string, Record<'newman' | 'schroeder' | 'equal', number>>>('th.phases', (check) => {
  it.each(Object.entries(check.expected))('%s carriers', (name, expected) => {
    const count = Number(name);
    // sixteen points a carrier; a transform has at least 16 bins
    const fftSize = Math.max(16, count);
    const oversampling = (16 * count) / fftSize;
    for (const kind of ['newman', 'schroeder'] as const) {
      expect(Math.abs(paprDb(comb(fftSize, count, oversampling, { kind, count })) - expected[kind])).toBeLessThan(1e-9);
    }
    expect(Math.abs(paprDb(comb(fftSize, count, oversampling, { kind: 'constant' })) - expected.equal)).toBeLessThan(
      1e-9,
    );
  });
});

describe('tones', () => {
  const tone = (k: number[], phaseDeg = 0): WaveformContent => {
    const ink: ToneInk = {
      inkId: 'k1',
      name: 'tone',
      role: 'tone',
      powerDb: 0,
      value: { factors: [], phaseDeg, continuous: true },
    };
    return smallContent({
      tray: [NULL_INK, ink],
      oversampling: 16,
      grid: { rows: [rowOf(64, (at) => (k.includes(at) ? 1 : 0))], rowOfSymbol: [0] },
    });
  };
  testCheck<Record<string, number>>('th.tones', (check) => {
    expect(Math.abs(paprDb(tone([5], 33)))).toBeLessThan(1e-6);
    expect(Math.abs(paprDb(tone([-3, 8])) - check.expected.complex_two_tone!)).toBeLessThan(1e-6);
    expect(Math.abs(paprDb(tone([-1, 1])) - check.expected['bpsk_dc_plus_minus_1_pair(k=-1,+1)']!)).toBeLessThan(1e-6);
    expect(Math.abs(paprDb(comb(16, 16, 16, { kind: 'constant' })) - check.expected.N_equal_16!)).toBeLessThan(1e-6);
  });

  it('run on through prefixes, gaps and repeats when continuous, and jump when not', () => {
    const base = tone([5], 10);
    const running: WaveformContent = {
      ...base,
      oversampling: 1,
      symbolCount: 3,
      prefixSamples: [7, 13],
      timing: { mode: 'burst', repeats: 2, gapSamples: 9, padSamples: 0 },
      grid: { rows: base.grid.rows, rowOfSymbol: [0, 0, 0] },
    };
    const samples = renderSamples(running);
    const start = Math.PI / 18;
    let compared = 0;
    for (let n = 0; n < samples.length / 2; n++) {
      if (samples[2 * n] === 0 && samples[2 * n + 1] === 0) continue;
      compared++;
      const angle = start + (2 * Math.PI * 5 * n) / 64;
      expect(Math.abs(samples[2 * n]! - Math.cos(angle) / 8)).toBeLessThan(1e-13);
      expect(Math.abs(samples[2 * n + 1]! - Math.sin(angle) / 8)).toBeLessThan(1e-13);
    }
    expect(compared).toBe(2 * (3 * 64 + 27));
    const ink = { ...(running.tray[1] as ToneInk) };
    const jumping = renderSamples({
      ...running,
      tray: [NULL_INK, { ...ink, value: { ...ink.value, continuous: false } }],
    });
    const phase = (n: number): number => Math.atan2(jumping[2 * n + 1]!, jumping[2 * n]!);
    // the same value in every symbol: both useful parts begin with the tone's own phase
    expect(phase(7)).toBeCloseTo(start, 12);
    expect(phase(7 + 64 + 13)).toBeCloseTo(start, 12);
  });
});

/** Words of samples back as samples, by the real writer and reader. */
function throughWords(samples: Float64Array, bits: number, unitsAtFullScale: number): Float64Array {
  const profile = { ...bench, bits };
  const fullScale = 2 ** (bits - 1) - 1;
  const scale = { scale: unitsAtFullScale, fullScale, referenceLevel: 1, isSilent: false };
  const writer = createWordWriter(profile, scale);
  const bytes = new Uint8Array(2 * samples.length);
  writer.write(samples, samples.length / 2, bytes);
  const back = new Float64Array(samples.length);
  createWordReader(profile).readSamples(bytes, 0, samples.length / 2, unitsAtFullScale, back);
  return back;
}

function sqnrDb(samples: Float64Array, back: Float64Array): number {
  let noisePower = 0;
  let power = 0;
  for (let i = 0; i < samples.length; i++) {
    noisePower += (samples[i]! - back[i]!) ** 2;
    power += samples[i]! ** 2;
  }
  return 10 * Math.log10(power / noisePower);
}

describe('quantizing against theory', () => {
  describeCheck<Record<string, Record<string, number>>>('th.sqnr.sine', (sine) => {
    it.each([8, 10, 12, 14, 16])('%i bits', (bits) => {
      const samples = new Float64Array(2 * 65536);
      // a frequency far from every short fraction, in I alone
      for (let n = 0; n < 65536; n++) samples[2 * n] = Math.sin(Math.PI * n * (Math.sqrt(5) - 1) * 0.25);
      const measured = sqnrDb(samples, throughWords(samples, bits, 2 ** (bits - 1) - 1));
      expect(Math.abs(measured - sine.expected[bits]!['measured_mid_tread_F=2^(b-1)-1']!)).toBeLessThan(0.1);
    });
  });

  describeCheck<Record<string, number>>('th.sqnr.complex', (complex) => {
    describeCheck('th.sqnr.ofdm', () => {
      it.each([8, 12, 16])('%i bits', (bits) => {
        expect(complex.expected[`b${bits}_cf13`]).toBeCloseTo(10 * Math.log10(3 * 4 ** bits) - 13, 9);
        const content = smallContent({
          fftSize: 256,
          symbolCount: 200,
          tray: [NULL_INK, dataInk(1, { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' })],
          streams: [pnStream(0)],
          level: { reference: 'componentPeak', headroomDb: 0 },
          grid: {
            rows: [rowOf(256, (k) => (k !== 0 && Math.abs(k) <= 60 ? 1 : 0))],
            rowOfSymbol: new Array<number>(200).fill(0),
          },
        });
        const profile = { ...bench, bits };
        const { bytes, stats, scale } = renderWords(content, profile);
        const samples = renderSamples(content);
        const back = new Float64Array(samples.length);
        createWordReader(profile).readSamples(bytes, 0, samples.length / 2, scale.scale, back);
        const sqnr = sqnrDb(samples, back);
        const crest = 20 * Math.log10(stats.componentPeak / (stats.rms / Math.SQRT2));
        expect(Math.abs(sqnr - (10 * Math.log10(3 * 4 ** bits) - crest))).toBeLessThan(0.15);
        // the noise is white over all 256 bins, the signal stands on 120
        const transform = createTransform(256);
        const wanted = new Float64Array(512);
        const found = new Float64Array(512);
        let error = 0;
        let energy = 0;
        for (let symbol = 0; symbol < 200; symbol++) {
          transform.forward(samples.subarray(512 * symbol, 512 * (symbol + 1)), wanted);
          transform.forward(back.subarray(512 * symbol, 512 * (symbol + 1)), found);
          for (let k = 1; k <= 60; k++) {
            for (const i of [2 * k, 2 * k + 1, 2 * (256 - k), 2 * (256 - k) + 1]) {
              error += (found[i]! - wanted[i]!) ** 2;
              energy += wanted[i]! ** 2;
            }
          }
        }
        const evmDb = 10 * Math.log10(error / energy);
        expect(Math.abs(evmDb + sqnr + 10 * Math.log10(256 / 120))).toBeLessThan(0.3);
      });
    });
  });

  describeCheck<Record<string, Record<string, number>>>('th.loading', (loading) => {
    it.each([8, 10, 12, 14, 16])('%i bits', (bits) => {
      const expected = loading.expected[bits]!;
      const backoff = 10 ** (expected['at_component_backoff_db(A/sigma)']! / 20);
      // the component's whole range in even steps, weighted by its density: no luck in the tails
      const count = bits > 14 ? 800000 : 400000; // sixteen points a step and more
      const range = 9;
      const samples = Float64Array.from({ length: 2 * count }, (_, i) => range * ((i + 0.5) / count - 1));
      // 2^b steps span ±A, as the theory has it
      const back = throughWords(samples, bits, 2 ** (bits - 1) / backoff);
      let power = 0;
      let error = 0;
      for (let i = 0; i < samples.length; i++) {
        const density = Math.exp(-0.5 * samples[i]! ** 2);
        power += density * samples[i]! ** 2;
        error += density * (samples[i]! - back[i]!) ** 2;
      }
      expect(Math.abs(10 * Math.log10(power / error) - expected.best_sqnr_db!)).toBeLessThan(0.05);
    });
  });

  it('scales each reference to F less the headroom', () => {
    const levels = { interpolatedPeak: 4, samplePeak: 3, componentPeak: 2, rms: 1 };
    for (const reference of ['interpolatedPeak', 'samplePeak', 'componentPeak', 'rms'] as const) {
      const { scale } = wordScale({ reference, headroomDb: 6 }, levels, { word: 'int16', bits: 12 });
      expect(scale * levels[reference]).toBeCloseTo(2047 * 10 ** (-6 / 20), 9);
    }
    expect(wordScale({ reference: 'rms', headroomDb: 0 }, levels, { word: 'float32', bits: 16 })).toMatchObject({
      scale: 1,
      fullScale: 1,
    });
  });
});
