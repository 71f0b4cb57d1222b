/** Shapes of the measures. Every power is a mean of |x|² in the units of the samples it was taken of; every dB is 10 lg of a power ratio. */

/** One symbol's share of the frame on the interpolated waveform; made by `createSymbolTally`, filled by `tallySymbol`. */
export interface SymbolTally {
  /** Σ|x|² over the symbol's own span (prefix with its ramps, useful part) as an unevaluated sum hi + lo. */
  sumHi: number;
  sumLo: number;
  /** Largest |x|² in that span, and where it stands, in samples after the span's first. */
  peakPower: number;
  peakAt: number;
  /** Samples in the span. */
  samples: number;
  /** The useful part alone: its own mean and its own largest |x|². A silent symbol has both 0. */
  usefulMeanPower: number;
  usefulPeakPower: number;
  /** First bin of `counts` in the frame's histogram. */
  firstBin: number;
  /** Samples by power from `firstBin` up (TALLY_BINS of them); what is weaker is counted in the first. */
  counts: Uint32Array;
}

/** What the frame's tallies say together. */
export interface FramePower {
  /** Mean and largest |x|² over the active spans, gap and pad out; the figures in dB are null when nothing is painted. */
  meanPower: number;
  peakPower: number;
  paprDb: number | null;
  /** The slot (repeat · L + symbol) that holds the peak, and the sample within its span. */
  peakSlot: number;
  peakAt: number;
  /** The same over symbols that are not silent. */
  activeMeanPower: number;
  activePaprDb: number | null;
  samples: number;
}

/** Samples by |x|²: bin b holds powers from `powerOfBin(b)` up to `powerOfBin(b + 1)`, 32 bins an octave. */
export interface PowerHistogram {
  /** Whole numbers, POWER_BINS of them. */
  counts: Float64Array;
  total: number;
}

/** A curve: the part of the samples (or symbols) that lies above `thresholdsDb`, 0…1. */
export interface CcdfCurve {
  /** The array that the caller gave, rising. */
  thresholdsDb: Float64Array;
  probability: Float64Array;
}

/** Windows by name; their coefficients stand in window.ts with their source. */
export type WindowKind = 'rectangular' | 'hann' | 'hamming' | 'blackman' | 'blackmanHarris' | 'nuttall' | 'flatTop';

/** A window with what it does to noise and to a tone; made by createWindow, owned by its caller. */
export interface WindowTable {
  kind: WindowKind;
  /** Periodic form, `weights.length` points. */
  weights: Float64Array;
  /** Equivalent noise bandwidth in bins: n·Σw²/(Σw)². */
  enbwBins: number;
  /** Σw/n. */
  coherentGain: number;
}

/** A density over a whole sample clock, lowest frequency first: bin i stands at (i − ⌊n/2⌋)·binHz, and Σ density · binHz = mean power. */
export interface Spectrum {
  /** Power per hertz, in the samples' own unit of power. */
  density: Float64Array;
  binHz: number;
  window: WindowKind;
  /** Resolution bandwidth: ENBW · binHz. */
  rbwHz: number;
  segments: number;
}

/** A band on the frequency axis of a spectrum: 0 Hz is the carrier, edges may lie within a bin. */
export interface OccupiedBand {
  lowHz: number;
  highHz: number;
  widthHz: number;
}

/** The peak of a quantized file between its samples, with the method that found it. */
export interface ReconstructedPeak {
  /** Largest |x|² of the interpolated samples, and its place in samples of the file (eighths). */
  power: number;
  atSample: number;
  method: 'exactTransforms' | 'polyphaseFilter';
  /** The method in words for manifest and card. */
  words: string;
  factor: 8;
  /** Taps a side of the filter; null for the exact method. */
  tapsEachSide: number | null;
}

/** How an EVM was taken; stands beside every figure. */
export interface EvmRecipe {
  cells: string;
  estimate: 'none' | 'oneGain' | 'tapPerSubcarrier' | 'tapFromPilots';
  phaseTracking: 'none' | 'perSymbol';
  /** Where the transform begins, in samples of the file after the symbol's prefix began. */
  dftWindow: string;
  frames: number;
  /** Symbols behind each estimated tap, for the bias of least squares; null where no bias is known. */
  symbolsPerTap: number | null;
}

/** One error vector magnitude; `db` is 20 lg of `ratio`, after the bias of the fit was taken out. */
export interface EvmFigure {
  /** √(Σ|Y/Ĥ − X|² / Σ|X|²), 0…; null when no energy was meant or nothing was compared. */
  ratio: number | null;
  db: number | null;
  /** The figure before the bias of the fit is taken out. */
  uncorrectedDb: number | null;
  cells: number;
}

/** EVM in all and by group, each over its own Σ|X|², never a mean of dB. New arrays, the caller's own. */
export interface EvmReport {
  all: EvmFigure;
  /** By ink number, ink 0 (null) with no cells. */
  byInk: EvmFigure[];
  /** By symbol of the frame, pooled over repeats. */
  bySymbol: EvmFigure[];
  /** By position p = k + ⌊N/2⌋. */
  bySubcarrier: EvmFigure[];
  /** Normalised correlation of what was meant and what was found, 0…1. */
  correlation: number;
  recipe: EvmRecipe;
}
