/** The levels that a scale can refer to, in units of x. */
export interface ReferenceLevels {
  /** Interpolated magnitude peak of the whole file (at M′). */
  interpolatedPeak: number;
  samplePeak: number;
  componentPeak: number;
  /** RMS of the whole file, gap and pad in. */
  rms: number;
}

/** From units of x to words: word = round(x · scale). */
export interface WordScale {
  /** LSB per unit of x (floats: full scale 1.0 per unit). 0 when there is nothing to scale. */
  scale: number;
  /** F = 2^(bits−1) − 1, for floats 1. */
  fullScale: number;
  /** The reference's level in units of x. */
  referenceLevel: number;
  /** True when the whole file is zero: no scale exists, every word is 0. */
  isSilent: boolean;
}

/** What did not fit: integers saturated (never wrapped), floats beyond ±1 (kept as they are). */
export interface SaturationCount {
  components: number;
  /** Samples with at least one such component. */
  samples: number;
}
