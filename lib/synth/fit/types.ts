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
  | 'headroom'
  | 'level';

export type FitVerdict = 'meets' | 'misses' | 'cannotJudge';

export interface Remedy {
  /** What the button says: a verb and its effect. */
  label: string;
  changes: PlainChange[];
  /** What it costs, in words. */
  cost: string;
}

export interface FitFinding {
  check: FitCheck;
  /** The name a person reads: "Length". */
  title: string;
  /** What was found, in the limit's unit; null when it cannot be told. */
  measured: number | null;
  limit: number | null;
  unit: 'samples' | 'Hz' | 'dB' | 'dBm' | 'markers' | 'turns' | 'repeats' | 'cells' | 'components' | null;
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
