import {
  createReductionMeasure,
  createSentValues,
  createSynthesis,
  meanPowerBefore,
  type Ink,
  type WaveformContent,
} from '@/lib/synth';
import { clipEnvelope } from '@/lib/synth/peak/clipFilter';
import { describeCheck } from '../../../../helpers/checks';
import { NULL_INK, dataInk, factor, pilotInk, pnStream, rowOf, smallContent } from '../../../../helpers/content';
import { directTransform, relativeDb } from '../../../../helpers/directTransform';
import { renderSamples } from '../../../../helpers/renderWords';
import { openTestEngine } from '../../../../helpers/sampleEngine';

// rounding of doubles through a few passes of two transforms
const SAME_DB = -270;

const reserved: Ink = { inkId: 'k3', name: 'reserved', role: 'reserved', powerDb: 0, value: null };
const tone: Ink = {
  inkId: 'k4',
  name: 'tone',
  role: 'tone',
  powerDb: 6,
  value: { factors: [], phaseDeg: 30, continuous: false },
};

/** Every role, a silent symbol, ramps, uneven prefixes, repeats that differ. */
function mixed(changes: Partial<WaveformContent> = {}): WaveformContent {
  const inkOf = (k: number) =>
    k === 0 || Math.abs(k) > 12 ? 0 : Math.abs(k) > 10 ? 3 : k === 7 ? 4 : k % 4 === 0 ? 2 : 1;
  return smallContent({
    fftSize: 32,
    symbolCount: 4,
    prefixSamples: [6, 5],
    overlapSamples: 2,
    timing: { mode: 'burst', repeats: 2, gapSamples: 1, padSamples: 3 },
    tray: [
      NULL_INK,
      dataInk(1, { constellation: '16qam', bitMap: 'ts38211', streamId: 's0' }),
      pilotInk(2, [factor({ kind: 'zadoffChu', length: 7, root: 3, shift: 0 })]),
      reserved,
      tone,
    ],
    streams: [pnStream(0, { acrossRepeats: 'continue' })],
    grid: { rows: [rowOf(32, inkOf), [32, 0]], rowOfSymbol: [0, 0, 1, 0] },
    peakReduction: { kind: 'clipAndFilter', targetPaprDb: 4, iterations: 3 },
    ...changes,
  });
}

const meantOf = (content: WaveformContent) => createSentValues({ ...content, peakReduction: { kind: 'none' } });

/** The mean of the loud symbols of the frame, from the samples of a plain rendering and the document's timing. */
function meanByHand(content: WaveformContent): number {
  const plain: WaveformContent = { ...content, peakReduction: { kind: 'none' } };
  const samples = renderSamples(plain, 4);
  const { layout } = createSynthesis(plain, { oversampling: 4 });
  let energy = 0;
  let count = 0;
  for (let repeat = 0; repeat < layout.repeats; repeat++) {
    const last = repeat === layout.repeats - 1 ? layout.lastActiveSamples : layout.activeSamples;
    for (let symbol = 0; symbol < layout.symbolCount; symbol++) {
      if (content.grid.rowOfSymbol[symbol] === 1) continue;
      const from = repeat * layout.repeatSamples + layout.symbolStarts[symbol]!;
      const isLast = symbol === layout.symbolCount - 1;
      const end = isLast
        ? repeat * layout.repeatSamples + last
        : from + layout.prefixes[symbol]! + layout.usefulSamples;
      for (let i = from; i < end; i++) energy += samples[2 * i]! ** 2 + samples[2 * i + 1]! ** 2;
      count += end - from;
    }
  }
  return energy / count;
}

/** Repeated clipping and filtering of one symbol's cells by transforms written out as sums. */
function clipByHand(values: Float64Array, isFree: (p: number) => boolean, limit: number, passes: number): Float64Array {
  const size = values.length / 2;
  const samples = 4 * size;
  const bin = (p: number) => (p - size / 2 + samples) % samples;
  const cells = Float64Array.from(values);
  for (let pass = 0; pass < passes; pass++) {
    const bins = new Float64Array(2 * samples);
    for (let p = 0; p < size; p++) bins.set(cells.subarray(2 * p, 2 * p + 2), 2 * bin(p));
    const x = directTransform(bins, 1).map((part) => part / Math.sqrt(size));
    let clipped = 0;
    for (let i = 0; i < x.length; i += 2) {
      const length = Math.hypot(x[i]!, x[i + 1]!);
      if (length <= limit) continue;
      clipped++;
      x[i] = (x[i]! / length) * limit;
      x[i + 1] = (x[i + 1]! / length) * limit;
    }
    if (clipped === 0) break;
    const back = directTransform(x, -1);
    for (let p = 0; p < size; p++) {
      if (!isFree(p)) continue;
      cells[2 * p] = (back[2 * bin(p)]! * Math.sqrt(size)) / samples;
      cells[2 * p + 1] = (back[2 * bin(p) + 1]! * Math.sqrt(size)) / samples;
    }
  }
  return cells;
}

describe('clip and filter', () => {
  const content = mixed();
  const limit = Math.sqrt(10 ** 0.4 * meanByHand(content));

  it('stands over the mean of the loud symbols: all repeats, prefixes, ramps and suffixes in', () => {
    expect(meanPowerBefore(content) / meanByHand(content)).toBeCloseTo(1, 12);
    const many = mixed({ streams: [pnStream(0)], timing: { mode: 'loop', repeats: 7, gapSamples: 0, padSamples: 0 } });
    expect(meanPowerBefore(many) / meanByHand(many)).toBeCloseTo(1, 12);
  });

  it('is what its formula says, cell by cell', () => {
    const values = createSentValues(content);
    const meant = meantOf(content);
    const sent = new Float64Array(64);
    const before = new Float64Array(64);
    for (const repeat of [1]) {
      for (let symbol = 0; symbol < 4; symbol++) {
        meant.write(repeat, symbol, before);
        values.write(repeat, symbol, sent);
        const inks = values.cells.subarray(32 * symbol, 32 * symbol + 32);
        const expected = clipByHand(before, (p) => inks[p] === 1 || inks[p] === 3, limit, 3);
        if (symbol === 2) expect(sent.every((part) => part === 0)).toBe(true);
        else expect(relativeDb(sent, expected)).toBeLessThan(SAME_DB);
        // known cells and bare paper keep their bits
        for (let p = 0; p < 32; p++) {
          if (inks[p] === 1 || inks[p] === 3) continue;
          expect([sent[2 * p], sent[2 * p + 1]]).toEqual([before[2 * p], before[2 * p + 1]]);
        }
      }
    }
  });

  it('is rendered: cells of the rendered symbol are those that are sent', () => {
    const one = mixed({ timing: { mode: 'loop', repeats: 1, gapSamples: 0, padSamples: 0 }, overlapSamples: 0 });
    const samples = renderSamples(one);
    const values = createSentValues(one);
    const { layout } = createSynthesis(one);
    const sent = new Float64Array(64);
    values.write(0, 1, sent);
    const start = layout.symbolStarts[1]! + layout.prefixes[1]!;
    const found = directTransform(samples.slice(2 * start, 2 * (start + 32)), -1);
    const inOrder = new Float64Array(64);
    for (let p = 0; p < 32; p++) {
      const bin = (p + 16) % 32;
      inOrder[2 * p] = found[2 * bin]! / Math.sqrt(32);
      inOrder[2 * p + 1] = found[2 * bin + 1]! / Math.sqrt(32);
    }
    expect(relativeDb(inOrder, sent)).toBeLessThan(SAME_DB);
  });

  it('has the same bits with and without an engine, from any sample, and at any oversampling the same cells', () => {
    const engine = openTestEngine();
    for (const oversampling of [1, 4]) {
      const wanted = renderSamples(content, oversampling);
      const synthesis = createSynthesis(content, { engine, oversampling });
      const found = new Float64Array(2 * synthesis.samples);
      synthesis.read(found);
      expect(found).toEqual(wanted);
      synthesis.seek(97 * oversampling);
      const rest = new Float64Array(2 * (synthesis.samples - 97 * oversampling));
      synthesis.read(rest);
      expect(rest).toEqual(wanted.slice(2 * 97 * oversampling));
    }
  });

  it('ends when the target is reached, and says the best where it is not', () => {
    const report = (changes: Partial<WaveformContent>) => {
      const measuring = createReductionMeasure(mixed(changes))!;
      while (measuring.step());
      return measuring.result();
    };
    const easy = report({ peakReduction: { kind: 'clipAndFilter', targetPaprDb: 20, iterations: 50 } });
    expect(easy).toMatchObject({ isReached: true, passes: 0, meanPowerChangeDb: 0 });
    expect(easy.evm.all.ratio).toBe(0);
    const hard = report({ peakReduction: { kind: 'clipAndFilter', targetPaprDb: 3, iterations: 2 } });
    expect(hard).toMatchObject({ isReached: false, passes: 2 });
    expect(hard.reachedPaprDb!).toBeLessThan(hard.beforePaprDb!);
    expect(hard.evm.all.db!).toBeGreaterThan(-40);
    // one gain takes the part of the change that is a mere loss of level
    expect(hard.evmGainFitted.all.ratio!).toBeLessThan(hard.evm.all.ratio!);
    expect(hard.meanPowerChangeDb!).toBeLessThan(0);
    const noData = report({
      tray: mixed().tray.map((ink, i) => (i === 1 ? { ...mixed().tray[2]!, inkId: 'k1' } : ink)),
      grid: { rows: [rowOf(32, (k) => (k % 4 === 1 ? 1 : 0))], rowOfSymbol: [0, 0, 0, 0] },
    });
    expect(noData).toMatchObject({ passes: 0, filledCells: 0 });
  });
});

interface Limited {
  complex_alpha: number;
  complex_sdr_db: number;
}

describeCheck<Record<string, Limited>>('th.bussgang', (check) => {
  // one clipping pass of interpolated symbols, without the filter that follows it
  const loaded = smallContent({
    fftSize: 512,
    symbolCount: 200,
    tray: [NULL_INK, dataInk(1, { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' })],
    streams: [pnStream(0, { source: { kind: 'gold', cInit: 99 } })],
    grid: { rows: [[512, 1]], rowOfSymbol: new Array<number>(200).fill(0) },
  });
  const samples = renderSamples(loaded, 4);
  const power = samples.reduce((sum, part) => sum + part * part, 0);
  it.each([3, 4, 5, 6])('a clipping pass %i dB above the mean', (aboveDb) => {
    const expected = check.expected[aboveDb]!;
    const clipped = Float64Array.from(samples);
    clipEnvelope(clipped, (10 ** (aboveDb / 10) * power) / (samples.length / 2));
    let along = 0;
    let out = 0;
    clipped.forEach((part, i) => {
      along += part * samples[i]!;
      out += part * part;
    });
    const alpha = along / power;
    const sdrDb = 10 * Math.log10((alpha * alpha) / (out / power - alpha * alpha));
    expect(Math.abs(20 * Math.log10(alpha / expected.complex_alpha))).toBeLessThan(0.3);
    expect(Math.abs(sdrDb - expected.complex_sdr_db)).toBeLessThan(0.3);
  });
});
