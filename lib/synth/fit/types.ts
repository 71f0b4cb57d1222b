/** Shapes of the fit: a revision against one bench profile. */

/** One change of the waveform document, as a JSON Pointer from its root with the whole value before and after. */
export interface PlainChange {
  pointer: string;
  before: unknown;
  after: unknown;
}

export type FitCheck =
  | 'clock'
  | 'granularity'
  | 'leastLength'
  | 'memory'
  | 'mode'
  | 'word'
  | 'markers'
  | 'seam'
  | 'toneJump'
  | 'payloadWrap'
  | 'symbolPeak'
  | 'headroom'
  | 'level';

export type FitVerdict = 'meets' | 'misses' | 'cannotJudge';

/** What a remedy turns: the numbers of the document that it changes. */
export type RemedyKind =
  | 'repeats'
  | 'dropRepeats'
  | 'oversampling'
  | 'spacing'
  | 'fftSize'
  | 'offset'
  | 'tones'
  | 'payload'
  | 'mode'
  | 'gap'
  | 'pad'
  | 'markers'
  | 'headroom'
  | 'outputLevel';

/** The price of a remedy in the two units that every remedy has. */
export interface RemedyPrice {
  /** Samples that the file gains; negative where it loses some. */
  samples: number;
  /**
   * How far the frequencies in the file move, in parts per million of the sample clock: the subcarrier spacing's own change in ppm, or a
   * shift of the frequency offset over the clock. 0 where every frequency stays.
   */
  ppm: number;
}

export interface Remedy {
  kind: RemedyKind;
  /** What the button says: a verb and its effect. */
  label: string;
  changes: PlainChange[];
  price: RemedyPrice;
  /** What it costs, in words, the price first. */
  cost: string;
}

export interface FitFinding {
  check: FitCheck;
  /** The name a person reads: "Length". */
  title: string;
  /** What was found, in the limit's unit; null when it cannot be told. */
  measured: number | null;
  limit: number | null;
  unit: 'samples' | 'Hz' | 'dB' | 'dBm' | 'markers' | 'turns' | 'repeats' | 'components' | null;
  /** By how much it misses (positive) or is inside (zero or negative), in `unit`; null when not a distance. */
  distance: number | null;
  verdict: FitVerdict;
  /** A miss refuses the pack. */
  hard: boolean;
  /** By how much, short: "2048 samples short". Empty when met. */
  byHowMuch: string;
  /** Found, short, for the row of a check that is met: "30 720 of 67 108 864". */
  found: string;
  /** One sentence. */
  words: string;
  remedies: Remedy[];
}

/** A finding before remedies are sought. */
export type Finding = Omit<FitFinding, 'remedies'>;

/** What rendering and reading back measured; null where it was not done (the finding then cannot judge). */
export interface MeasuredLevels {
  /** dB to full scale, 0 dBFS the RMS magnitude of a complex tone with |x| = F. */
  fileRmsDbfs: number | null;
  activeRmsDbfs: number | null;
  renderedPeakDbfs: number | null;
  reconstructedPeakDbfs: number | null;
  saturatedComponents: number | null;
}

/** The loop's wrap as it was rendered. Steps are |x[n+1] − x[n]| over the RMS of the file. */
export interface SeamMeasure {
  /** From the file's last sample to its first. */
  stepAtWrap: number;
  /** The largest between any two neighbours inside the file. */
  stepElsewhere: number;
  /** Up to 64 last and 64 first samples, joined as the loop plays them, interleaved re, im, over the RMS; the wrap is in the middle. */
  around: number[];
}

/** How far the peaks of the symbols stand apart. */
export interface SymbolPeaks {
  /** The highest peak over the median of all symbols that send something, dB, and its symbol. */
  aboveMedianDb: number;
  symbol: number;
  /** Symbols whose peak stands 3 dB or more above the median. */
  outstanding: number[];
}

/** What only a rendering tells beside the levels; each null where it was not measured. */
export interface MeasuredWave {
  seam: SeamMeasure | null;
  symbolPeaks: SymbolPeaks | null;
}

/** What a fit may know beside document, profile and levels. */
export interface FitKnowledge {
  wave?: MeasuredWave | null;
  /** Why there are no levels, as one sentence; "has not been measured yet" where not said. */
  unmeasuredBecause?: string;
}
