import fc from 'fast-check';
import {
  compressGrid,
  createCellValues,
  createSymbolSynthesis,
  createSynthesis,
  createTransform,
  expandGrid,
  vectorStats,
  type WaveformContent,
} from '@/lib/synth';
import { arbitraryContent } from '../../../helpers/arbitraryContent';
import { relativeDb } from '../../../helpers/directTransform';
import { plainSynthesis } from '../../../helpers/plainSynthesis';
import { renderSamples } from '../../../helpers/renderWords';

/** Double arithmetic over a dozen transform levels against plain sums: a floor with room above the 1e-9 that cells are held to. */
const MOST_ERROR_DB = -290;

const isSilent = (samples: Float64Array): boolean => samples.every((part) => part === 0);

describe('renderings of random documents', () => {
  it('equal the plain sum', () => {
    fc.assert(
      fc.property(arbitraryContent({ cellsMost: 256, samplesMost: 1200 }), (content) => {
        const wanted = plainSynthesis(content);
        const found = renderSamples(content);
        expect(found.length).toBe(wanted.length);
        if (!isSilent(wanted)) expect(relativeDb(found, wanted)).toBeLessThan(MOST_ERROR_DB);
        else expect(isSilent(found)).toBe(true);
      }),
      { numRuns: 30 },
    );
  });

  it('do not depend on how blocks are cut', () => {
    fc.assert(
      fc.property(
        arbitraryContent(),
        fc.array(fc.integer({ min: 1, max: 700 }), { minLength: 1, maxLength: 5 }),
        (content, cuts) => {
          const whole = renderSamples(content);
          const synthesis = createSynthesis(content);
          for (let pass = 0; pass < 2; pass++) {
            const pieces = new Float64Array(whole.length);
            for (let at = 0, i = 0; at < whole.length; i++) {
              at += 2 * synthesis.read(pieces.subarray(at, at + 2 * cuts[i % cuts.length]!));
            }
            expect(Buffer.from(pieces.buffer).equals(Buffer.from(whole.buffer))).toBe(true);
            expect(synthesis.read(pieces)).toBe(0);
            synthesis.rewind();
          }
        },
      ),
      { numRuns: 30 },
    );
  });

  it('keep the power of their cells (Parseval), symbol by symbol', () => {
    fc.assert(
      fc.property(arbitraryContent(), (content) => {
        const symbols = createSymbolSynthesis(content);
        const size = symbols.layout.usefulSamples;
        const useful = new Float64Array(2 * size);
        const values = new Float64Array(2 * content.fftSize);
        for (let l = 0; l < content.symbolCount; l++) {
          symbols.useful(0, l, useful);
          createCellValues(content).write(0, l, values);
          const mean = energy(useful) / size;
          expect(Math.abs(mean - energy(values) / content.fftSize)).toBeLessThanOrEqual(1e-12 * mean);
        }
      }),
      { numRuns: 30 },
    );
  });

  it('begin every symbol with a copy of its tail, and give their cells back', () => {
    fc.assert(
      fc.property(arbitraryContent(), (generated) => {
        const content: WaveformContent = { ...generated, overlapSamples: 0, frequencyOffsetHz: 0 };
        const samples = renderSamples(content);
        const { layout } = createSynthesis(content);
        const size = layout.usefulSamples;
        const half = Math.floor(content.fftSize / 2);
        const transform = createTransform(size);
        const bins = new Float64Array(2 * size);
        const values = createCellValues(content);
        const wanted = new Float64Array(2 * content.fftSize);
        const found = new Float64Array(2 * content.fftSize);
        for (let r = 0; r < layout.repeats; r++) {
          for (let l = 0; l < content.symbolCount; l++) {
            const start = r * layout.repeatSamples + layout.symbolStarts[l]!;
            const prefix = layout.prefixes[l]!;
            const head = samples.subarray(2 * start, 2 * (start + prefix));
            const tail = samples.subarray(2 * (start + size), 2 * (start + size + prefix));
            expect(head.every((value, i) => Object.is(value, tail[i]))).toBe(true);
            transform.forward(samples.subarray(2 * (start + prefix), 2 * (start + prefix + size)), bins);
            for (let p = 0; p < content.fftSize; p++) {
              const bin = (p - half + size) % size;
              found[2 * p] = (bins[2 * bin]! * Math.sqrt(content.fftSize)) / size;
              found[2 * p + 1] = (bins[2 * bin + 1]! * Math.sqrt(content.fftSize)) / size;
            }
            values.write(r, l, wanted);
            const largest = wanted.reduce((most, value, i) => Math.max(most, Math.abs(found[i]! - value)), 0);
            expect(largest).toBeLessThan(1e-9);
          }
        }
      }),
      { numRuns: 30 },
    );
  });

  it('are linear in the cells: two halves of a grid add up', () => {
    fc.assert(
      fc.property(arbitraryContent({ samplesMost: 20000 }), fc.integer({ min: 1, max: 63 }), (generated, step) => {
        // running counters would move when cells are taken out: only what looks at its own place
        const content: WaveformContent = {
          ...generated,
          streams: generated.streams.map((stream) => ({ ...stream, fill: 'anchored' })),
          tray: generated.tray.map((ink) =>
            ink.role === 'pilot' || ink.role === 'tone'
              ? {
                  ...ink,
                  value: { ...ink.value, factors: ink.value.factors.map((f) => ({ ...f, counter: 'subcarrier' })) },
                }
              : ink,
          ) as WaveformContent['tray'],
        };
        const cells = expandGrid(content.grid, content.fftSize);
        const part = (keep: (i: number) => boolean): Float64Array =>
          renderSamples({
            ...content,
            grid: compressGrid(
              cells.map((ink, i) => (keep(i) ? ink : 0)),
              content.fftSize,
              content.symbolCount,
            ),
          });
        const whole = renderSamples(content);
        const first = part((i) => i % step === 0);
        const second = part((i) => i % step !== 0);
        const sum = first.map((value, i) => value + second[i]!);
        if (!isSilent(whole)) expect(relativeDb(sum, whole)).toBeLessThan(MOST_ERROR_DB);
      }),
      { numRuns: 30 },
    );
  });

  it('shift: a phase slope over subcarriers turns the useful part round', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 59 }), fc.integer({ min: 1, max: 60 }), (delay, seed) => {
        const points = (slope: number): [number, number][] =>
          Array.from({ length: 60 }, (_, p) => {
            // The two phases apart, the slope's in whole turns less: in one sum the first one's size would round the second away.
            const [re, im] = [Math.cos(seed * p * p), Math.sin(seed * p * p)];
            const angle = (-2 * Math.PI * ((slope * (p + 30)) % 60)) / 60;
            return [re * Math.cos(angle) - im * Math.sin(angle), re * Math.sin(angle) + im * Math.cos(angle)];
          });
        const useful = (slope: number): Float64Array => {
          const factors = [
            { sequence: { kind: 'listed' as const, points: points(slope) }, counter: 'subcarrier' as const, start: 0 },
          ];
          const out = new Float64Array(120);
          createSymbolSynthesis({
            fftSize: 60,
            subcarrierSpacingHz: [1, 1],
            symbolCount: 1,
            prefixSamples: [0],
            overlapSamples: 0,
            oversampling: 1,
            frequencyOffsetHz: 0,
            timing: { mode: 'loop', repeats: 1, gapSamples: 0, padSamples: 0 },
            tray: [
              { inkId: 'k0', name: 'null', role: 'null', powerDb: 0, value: null },
              { inkId: 'k1', name: 'pilot', role: 'pilot', powerDb: 0, value: { factors } },
            ],
            grid: { rows: [[60, 1]], rowOfSymbol: [0] },
            streams: [],
            peakReduction: { kind: 'none' },
            level: { reference: 'samplePeak', headroomDb: 0 },
            markers: [],
          }).useful(0, 0, out);
          return out;
        };
        const plain = useful(0);
        const late = useful(delay);
        for (let n = 0; n < 60; n++) {
          const from = (n + 60 - delay) % 60;
          expect(Math.abs(late[2 * n]! - plain[2 * from]!)).toBeLessThan(1e-13);
          expect(Math.abs(late[2 * n + 1]! - plain[2 * from + 1]!)).toBeLessThan(1e-13);
        }
      }),
      { numRuns: 30 },
    );
  });

  it('have levels that do not depend on the oversampling’s phase: RMS equals the plain mean', () => {
    fc.assert(
      fc.property(arbitraryContent(), (content) => {
        const samples = renderSamples(content);
        const stats = vectorStats(createSynthesis(content));
        const count = samples.length / 2;
        expect(Math.abs(stats.rms - Math.sqrt(energy(samples) / count))).toBeLessThanOrEqual(1e-13 * stats.rms);
        expect(stats.componentPeak).toBe(samples.reduce((most, value) => Math.max(most, Math.abs(value)), 0));
        const at = stats.samplePeakAt;
        expect(stats.samplePeak).toBe(
          Math.sqrt(samples[2 * at]! * samples[2 * at]! + samples[2 * at + 1]! * samples[2 * at + 1]!),
        );
        let peak = 0;
        for (let i = 0; i < samples.length; i += 2) peak = Math.max(peak, samples[i]! ** 2 + samples[i + 1]! ** 2);
        expect(stats.samplePeak).toBe(Math.sqrt(peak));
      }),
      { numRuns: 30 },
    );
  });
});

function energy(data: Float64Array): number {
  let sum = 0;
  for (const value of data) sum += value * value;
  return sum;
}
