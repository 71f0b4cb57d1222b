import { expandGrid } from '../grid/grid';
import { dbAtProbability } from '../measure/ccdf';
import { createFrameMeasure } from '../measure/frameMeasure';
import { createWelch, occupiedBandwidth, spectralNotch, welchSegment } from '../measure/spectrum';
import type { CcdfCurve } from '../measure/types';
import { createMeanPowerBefore, createSynthesis } from '../synthesize/synthesis';
import type { RenderOptions } from '../synthesize/types';
import type { WaveformContent } from '../types';
import { createReductionMeasure, type ReductionReport } from './reductionMeasure';

/** What stands beside each other before and after a peak was lowered, all of one rendering. Null where nothing is painted. */
export interface PeakFigures {
  /** Over the frame's own mean. */
  paprDb: number | null;
  /** The same, symbols that send nothing left out of the mean. */
  activePaprDb: number | null;
  /** Per symbol over its own mean, the worst of its repeats; NaN where silent. */
  symbolPaprDb: Float64Array;
  /** The symbol that holds the frame's peak. */
  worstSymbol: number | null;
  meanPower: number;
  /** Instantaneous power over mean power, per sample: the curve, and where one sample in a hundred, in a thousand lies above. */
  sampleCcdf: CcdfCurve;
  atOneInHundredDb: number | null;
  atOneInThousandDb: number | null;
  /** Spectral notch of the widest hole inside the painted span, mean density to the span's; null without a hole of two cells. */
  notchDb: number | null;
  /** Occupied bandwidth, 99 %. */
  occupiedHz: number | null;
  /** The reduction's own report; null where the content has none. */
  reduction: ReductionReport | null;
}

export interface FiguresMeasuring {
  readonly totalSteps: number;
  readonly doneSteps: number;
  step(): boolean;
  result(): PeakFigures;
}

/** Samples that the spectrum is taken of: a longer file by its beginning. */
const SPECTRUM_SAMPLES_MOST = 262144;
const BLOCK_SAMPLES = 8192;
/** Parts are not opened before their turn: each one counts alike. */
const PART_STEPS = 100;

function lazily<Thing>(make: () => Thing): () => Thing {
  let made: { thing: Thing } | null = null;
  return () => (made ??= { thing: make() }).thing;
}

/** Every figure of a waveform's peak, in steps: the frame at M′, the reduction, the spectrum of the rendered samples. */
export function createPeakMeasure(
  content: WaveformContent,
  options: Pick<RenderOptions, 'cells' | 'engine'> = {},
): FiguresMeasuring {
  const shared: Pick<RenderOptions, 'cells' | 'engine' | 'powerBefore'> = { ...options };
  const isReduced = content.peakReduction.kind !== 'none';
  // what the reduction's target stands over comes first, in steps of its own; what renders is opened when it is there
  const mean = isReduced ? createMeanPowerBefore(content, options) : null;
  if (mean) shared.powerBefore = mean.result;
  const frame = lazily(() => createFrameMeasure(content, shared));
  const reduction = lazily(() => createReductionMeasure(content, shared));
  const spectrum = lazily(() => createSpectrumSteps(content, shared));
  const parts = [...(mean ? [() => mean, reduction] : []), frame, spectrum];
  let at = 0;
  return {
    totalSteps: PART_STEPS * parts.length,
    get doneSteps() {
      const part = parts[at]?.();
      return PART_STEPS * at + (part ? Math.floor((PART_STEPS * part.doneSteps) / Math.max(1, part.totalSteps)) : 0);
    },
    step() {
      const part = parts[at]?.();
      if (part && !part.step()) at++;
      return at < parts.length;
    },
    result() {
      const { power, symbolPaprDb, sampleCcdf } = frame().result();
      // the curve's steps end above the highest sample
      const level = (probability: number): number | null => {
        const db = dbAtProbability(sampleCcdf, probability);
        return power.paprDb === null || db === null ? null : Math.min(power.paprDb, db);
      };
      return {
        paprDb: power.paprDb,
        activePaprDb: power.activePaprDb,
        symbolPaprDb,
        worstSymbol: power.paprDb === null ? null : power.peakSlot % content.symbolCount,
        meanPower: power.meanPower,
        sampleCcdf,
        atOneInHundredDb: level(1e-2),
        atOneInThousandDb: level(1e-3),
        ...spectrum().result(),
        reduction: reduction()?.result() ?? null,
      };
    },
  };
}

function createSpectrumSteps(
  content: WaveformContent,
  options: Pick<RenderOptions, 'cells' | 'engine' | 'powerBefore'>,
) {
  const synthesis = createSynthesis(content, options);
  const [numerator, denominator] = content.subcarrierSpacingHz;
  const spacingHz = numerator / denominator;
  const samples = Math.min(SPECTRUM_SAMPLES_MOST, synthesis.samples);
  const welch = createWelch({
    segmentLength: welchSegment(samples),
    clockHz: content.fftSize * content.oversampling * spacingHz,
  });
  const block = new Float64Array(2 * BLOCK_SAMPLES);
  const totalSteps = Math.ceil(samples / BLOCK_SAMPLES);
  let done = 0;
  return {
    totalSteps,
    get doneSteps() {
      return done;
    },
    step() {
      const count = synthesis.read(block);
      if (count > 0) welch.push(block, count);
      done = Math.min(totalSteps, done + 1);
      return count > 0 && done < totalSteps;
    },
    result(): Pick<PeakFigures, 'notchDb' | 'occupiedHz'> {
      const found = welch.result();
      const hole = widestHole(content, options.cells);
      const { frequencyOffsetHz } = content;
      const band = (from: number, to: number) => ({
        lowHz: from * spacingHz + frequencyOffsetHz,
        highHz: to * spacingHz + frequencyOffsetHz,
      });
      return {
        occupiedHz: occupiedBandwidth(found)?.widthHz ?? null,
        notchDb: hole && spectralNotch(found, band(hole.from, hole.to), band(hole.first, hole.last)).meanDb,
      };
    },
  };
}

/** The widest run of subcarriers that no symbol paints, inside the painted span: signed, all borders inside. */
function widestHole(
  { fftSize, grid, tray }: WaveformContent,
  given?: Uint8Array,
): { from: number; to: number; first: number; last: number } | null {
  const cells = given ?? expandGrid(grid, fftSize);
  const isPainted = new Uint8Array(fftSize);
  for (let i = 0; i < cells.length; i++) if (tray[cells[i]!]?.role !== 'null') isPainted[i % fftSize] = 1;
  const first = isPainted.indexOf(1);
  const last = isPainted.lastIndexOf(1);
  const lowest = -Math.floor(fftSize / 2);
  let from = 0;
  let width = 1; // one cell alone (DC) is no notch
  for (let p = first + 1, run = 0; p <= last; p++) {
    run = isPainted[p] === 1 ? 0 : run + 1;
    if (run <= width) continue;
    width = run;
    from = p - run + 1;
  }
  if (width < 2) return null;
  return { from: from + lowest, to: from + width - 1 + lowest, first: first + lowest, last: last + lowest };
}
