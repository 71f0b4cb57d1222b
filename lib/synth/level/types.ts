/** Shapes of the level card. */
import type { LevelMeans } from '../types';

/** What somebody entered on the card for another device; the pack's own card stays as reviewed. */
export interface CardOverrides {
  outputRmsDbm?: number | null;
  settingDbm?: number | null;
  lossDb?: number;
  devicePeakLimitDbm?: number | null;
  deviceMeanLimitDbm?: number | null;
  levelToleranceDb?: number;
}

/** The generator's setting read one way: what its number would mean, and what follows at the device. */
export interface CardReading {
  means: Exclude<LevelMeans, 'unknown'>;
  /** "its mean while the frame plays" */
  words: string;
  peakNowDbm: number | null;
  meanNowDbm: number | null;
  peakWithoutAttenuatorDbm: number | null;
  highestSettingDbm: number | null;
}

export interface LevelCard {
  /** Setting on the generator, from the wanted mean at the device or as typed; null when neither is known. */
  settingDbm: number | null;
  settingWords: string;
  levelMeans: LevelMeans;
  /** ⌊10·…⌋/10 over the given limits; null when no limit is given. */
  highestSettingDbm: number | null;
  readings: CardReading[];
  peakNowDbm: number | null;
  meanNowDbm: number | null;
  peakWithoutAttenuatorDbm: number | null;
  peakLimitDbm: number | null;
  meanLimitDbm: number | null;
  /** Limit minus level; negative is over. Null without limit or setting. */
  peakLeftDb: number | null;
  meanLeftDb: number | null;
  lossDb: number;
  levelToleranceDb: number;
  /** Peak of the file and its mean while it plays, dBFS. */
  peakDbfs: number | null;
  activeRmsDbfs: number | null;
  fileRmsDbfs: number | null;
  sampleClockHz: number;
  verdict: 'inside' | 'over' | 'noLimit' | 'unknown';
  /** The one sentence: "2.95 dB left to the peak limit, 4.00 dB to the mean." */
  sentence: string;
}

/** One of the eleven cautions, in their order; 1 and 2 are the card itself, 1 to 4 are always in view on a phone. */
export interface Caution {
  number: number;
  text: string;
  /** The point is a warning now, not only a rule (over a limit, none given). */
  severe: boolean;
}
