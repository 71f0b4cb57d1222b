import fc from 'fast-check';
import {
  createReductionMeasure,
  createSentValues,
  createSymbolSynthesis,
  createSynthesis,
  expandGrid,
  interpolationOf,
  meanPowerBefore,
  type PeakReduction,
  type WaveformContent,
} from '@/lib/synth';
import { arbitraryContent } from '../../../helpers/arbitraryContent';
import { renderSamples } from '../../../helpers/renderWords';
import { openTestEngine } from '../../../helpers/sampleEngine';

const arbitraryReduction: fc.Arbitrary<PeakReduction> = fc.record({
  kind: fc.constantFrom('clipAndFilter', 'toneReservation'),
  targetPaprDb: fc.double({ min: 3, max: 8, noNaN: true }),
  iterations: fc.integer({ min: 1, max: 6 }),
});

/** Any document, some of its inks made reserved, with a reduction. */
const arbitraryReduced: fc.Arbitrary<WaveformContent> = fc
  .tuple(arbitraryContent({ cellsMost: 512, samplesMost: 2000 }), arbitraryReduction, fc.integer({ min: 0, max: 7 }))
  .map(([content, peakReduction, pick]) => ({
    ...content,
    peakReduction,
    tray: content.tray.map((ink, place) =>
      place > 0 && place % 8 === pick
        ? { inkId: ink.inkId, name: ink.name, powerDb: 0, role: 'reserved' as const, value: null }
        : ink,
    ),
  }));

const RUNS = { numRuns: 25, seed: 20261201 };

function peaksOf(content: WaveformContent): number[] {
  const oversampling = interpolationOf(content.oversampling);
  const synthesis = createSymbolSynthesis(content, { oversampling });
  const useful = new Float64Array(2 * content.fftSize * oversampling);
  return Array.from({ length: content.symbolCount }, (_, symbol) => {
    synthesis.useful(0, symbol, useful);
    let peak = 0;
    for (let i = 0; i < useful.length; i += 2) peak = Math.max(peak, useful[i]! ** 2 + useful[i + 1]! ** 2);
    return peak;
  });
}

describe('lowered peaks of random documents', () => {
  it('change no cell that they may not, to the bit', () => {
    fc.assert(
      fc.property(arbitraryReduced, (content) => {
        const values = createSentValues(content);
        const cells = expandGrid(content.grid, content.fftSize);
        const sent = new Float64Array(2 * content.fftSize);
        const meant = new Float64Array(2 * content.fftSize);
        for (let symbol = 0; symbol < content.symbolCount; symbol++) {
          values.write(0, symbol, sent);
          values.meant.write(0, symbol, meant);
          for (let p = 0; p < content.fftSize; p++) {
            const { role } = content.tray[cells[symbol * content.fftSize + p]!]!;
            const mayChange =
              role === 'reserved' || (role === 'data' && content.peakReduction.kind === 'clipAndFilter');
            if (mayChange) continue;
            if (sent[2 * p] !== meant[2 * p] || sent[2 * p + 1] !== meant[2 * p + 1])
              throw new Error(`cell ${p} of symbol ${symbol}, ${role}, changed`);
          }
        }
      }),
      RUNS,
    );
  });

  it('raise no symbol by tone reservation, and stop at the target', () => {
    fc.assert(
      fc.property(arbitraryReduced, (content) => {
        const { peakReduction } = content;
        if (peakReduction.kind === 'none') return;
        const before = peaksOf({ ...content, peakReduction: { kind: 'none' } });
        const after = peaksOf(content);
        const limit = 10 ** (peakReduction.targetPaprDb / 10) * meanPowerBefore(content);
        before.forEach((peak, symbol) => {
          // rounding of two ways to the same samples
          if (peakReduction.kind === 'toneReservation') expect(after[symbol]!).toBeLessThanOrEqual(peak * (1 + 1e-9));
          if (peak <= limit) expect(after[symbol]!).toBeCloseTo(peak, 9);
        });
        const measuring = createReductionMeasure(content)!;
        while (measuring.step());
        const { passes, isReached, reachedPaprDb } = measuring.result();
        expect(passes).toBeLessThanOrEqual(peakReduction.iterations);
        if (isReached && reachedPaprDb !== null && content.timing.repeats === 1)
          expect(Math.max(...after)).toBeLessThanOrEqual(limit * (1 + 1e-8));
      }),
      RUNS,
    );
  });

  it('have the same bits with the engine, and wherever reading begins', () => {
    const engine = openTestEngine();
    fc.assert(
      fc.property(arbitraryReduced, fc.double({ min: 0, max: 1, noNaN: true }), (content, part) => {
        const wanted = renderSamples(content);
        const synthesis = createSynthesis(content, { engine });
        const from = Math.floor(part * (synthesis.samples - 1));
        synthesis.seek(from);
        const found = new Float64Array(wanted.length - 2 * from);
        synthesis.read(found);
        expect(Buffer.from(found.buffer).equals(Buffer.from(wanted.slice(2 * from).buffer))).toBe(true);
      }),
      RUNS,
    );
  });
});
