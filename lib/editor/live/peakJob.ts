import {
  createPeakMeasure,
  createPhaseSearch,
  createSeedSearch,
  expandGrid,
  streamsWithSeed,
  trayWithPhases,
} from '@/lib/synth/index';
import type {
  FiguresMeasuring,
  Ink,
  PeakFigures,
  PeakReduction,
  PeakSearch,
  PhaseChoice,
  SampleEngine,
  Stream,
  WaveformContent,
} from '@/lib/synth/index';

/** A way to a lower peak, with its blanks filled in; "now" measures the document as it is. */
export type PeakAsk =
  | { way: 'now' }
  | { way: 'phases' }
  | { way: 'seed'; streamId: string; first: number; count: number }
  | { way: 'toneReservation' | 'clipAndFilter'; targetPaprDb: number; iterations: number };

/** What a way would change in the document; null where it found nothing better. */
export type PeakChange = { tray: Ink[] } | { streams: Stream[] } | { peakReduction: PeakReduction } | null;

/** What a way came to. The figures are of the document with the change, or of the document where there is none. */
export interface PeakResult {
  ask: PeakAsk;
  change: PeakChange;
  figures: PeakFigures;
  /** Candidates tried, of phases and seeds. */
  tried: number;
  /** What was chosen, for words. */
  phases: (PhaseChoice & { ruledCells: number; hasSingles: boolean }) | null;
  seed: number | null;
}

/** How far a way is; the best so far lies below the document's own peak. */
export interface PeakProgress {
  done: number;
  total: number;
  bestPaprDb: number | null;
  /** Steps as words: "seed 120 of 200". */
  unit: 'tries' | 'symbols';
}

/** A way's work in steps, so that strokes are heard between them. */
export interface PeakJob {
  step(): boolean;
  progress(): PeakProgress;
  result(): PeakResult;
}

/** Throws SynthError for a way that the document does not take. */
export function createPeakJob(content: WaveformContent, ask: PeakAsk, engine?: SampleEngine): PeakJob {
  switch (ask.way) {
    case 'now':
      return measureJob(content, ask, null, engine);
    case 'phases': {
      const cells = expandGrid(content.grid, content.fftSize);
      const search = createPhaseSearch(content, { cells, engine });
      const { reach } = search;
      const inks = new Set(reach.ruled.map(({ ink }) => ink));
      const ruledCells = cells.reduce((sum, ink) => sum + (inks.has(ink) ? 1 : 0), 0);
      return searchJob(content, ask, search, engine, (choice) => ({
        change: { tray: trayWithPhases(content.tray, reach, choice) },
        phases: { ...choice, ruledCells, hasSingles: reach.single.length > 0 },
      }));
    }
    case 'seed': {
      const search = createSeedSearch(content, ask, { cells: expandGrid(content.grid, content.fftSize), engine });
      return searchJob(content, ask, search, engine, (seed) => ({
        change: { streams: streamsWithSeed(content.streams, ask.streamId, seed) },
        seed,
      }));
    }
    default: {
      const { way, targetPaprDb, iterations } = ask;
      const peakReduction: PeakReduction = { kind: way, targetPaprDb, iterations };
      return measureJob({ ...content, peakReduction }, ask, { peakReduction }, engine);
    }
  }
}

function measureJob(content: WaveformContent, ask: PeakAsk, change: PeakChange, engine?: SampleEngine): PeakJob {
  const measuring = createPeakMeasure(content, { engine });
  return {
    step: measuring.step,
    progress: () => ({ done: measuring.doneSteps, total: measuring.totalSteps, bestPaprDb: null, unit: 'symbols' }),
    result: () => ({ ask, change, figures: measuring.result(), tried: 0, phases: null, seed: null }),
  };
}

function searchJob<Choice>(
  content: WaveformContent,
  ask: PeakAsk,
  search: PeakSearch<Choice>,
  engine: SampleEngine | undefined,
  chosen: (choice: Choice) => Partial<PeakResult>,
): PeakJob {
  let measuring: FiguresMeasuring | null = null;
  return {
    step() {
      if (search.step()) return true;
      measuring ??= createPeakMeasure(search.best?.content ?? content, { engine });
      return measuring.step();
    },
    progress: () => ({
      done: search.done,
      total: search.total,
      bestPaprDb: search.best?.paprDb ?? null,
      unit: 'tries',
    }),
    result: () => ({
      ask,
      change: null,
      tried: search.total,
      phases: null,
      seed: null,
      ...(search.best ? chosen(search.best.choice) : {}),
      figures: measuring!.result(),
    }),
  };
}
