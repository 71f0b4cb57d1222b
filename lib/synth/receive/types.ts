import type { EvmReport } from '../measure/types';
import type { CaptureStatistics } from './statistics';

/** Where the channel comes from: pilot cells alone, or every cell whose value the document knows. */
export type ChannelSource = 'pilots' | 'allKnown';

/** A figure, or the bound below which nothing could be seen. */
export interface BoundedDb {
  db: number;
  /** True: it lies below `db`. */
  isBound: boolean;
}

/** Power found in null cells, dB to the mean used cell, as received (not equalized), pooled over the frames. */
export interface NullPower {
  /** The widest run of two or more neighbouring subcarriers inside the painted span that no symbol uses. */
  notch: { lowSubcarrier: number; highSubcarrier: number; cells: number; db: number } | null;
  /** All null cells inside the span. */
  inside: { cells: number; db: number } | null;
  /** The strongest of them, pooled over frames. */
  worst: { symbol: number; subcarrier: number; db: number } | null;
}

export interface ChannelReport {
  source: ChannelSource | 'oneGain';
  /** |Ĥ| in dB to its RMS over the used subcarriers; NaN where no cell was known (N, position order). */
  magnitudeDb: Float64Array;
  /** |h|² in dB to its largest, from firstDelay on, one base-rate sample apart; null where one gain was fitted. */
  impulseDb: Float64Array | null;
  firstDelaySamples: number;
  /** Base-rate sample, and the shortest usable guard N_cp − W and prefix in such samples. */
  delayStepSec: number;
  guardSamples: number;
  prefixSamples: number;
  paths: { delaySamples: number; powerDb: number }[];
}

/** I/Q imbalance and DC of the receiver or the generator. */
export interface ImbalanceReport {
  /**
   * The image, dB to the signal, of the capture's own axes; and of the generator's, seen apart only where the carrier offset moves the two
   * mirrors apart (null: they cannot be told apart, the first holds both).
   */
  image: BoundedDb | null;
  generatorImage: BoundedDb | null;
  /** From the first: I over Q in dB, and the angle between the axes less 90°; null with a bound. */
  gainDb: number | null;
  angleDeg: number | null;
  /** The capture's DC, dB to the signal and dB to full scale. */
  dc: BoundedDb | null;
  dcDbfs: number | null;
}

/** Equalized cells for a picture. */
export interface ConstellationPoints {
  /** re, im of each point. */
  points: Float32Array;
  inks: Uint8Array;
}

/** Which reading of the words was right. */
export interface FoundReading {
  /** Place in the list of readings that were offered. */
  reading: number;
  /** The spectrum is mirrored: I and Q swapped, Q negated, or a mixer above the carrier; a receiver cannot tell which. */
  isMirrored: boolean;
}

export interface Correlation {
  /** Normalised correlation ρ, 0…1. */
  value: number;
  /** What it must reach. */
  needed: number;
}

export interface MeasuredCapture {
  kind: 'measured';
  found: FoundReading;
  statistics: CaptureStatistics;
  correlation: Correlation;
  /** Frames (repeats, or files where repeats differ) of which a symbol was measured, and symbols in all. */
  frames: number;
  symbols: number;
  /** How often each symbol of the frame was measured; 0: no figure of it. */
  symbolCounts: Uint32Array;
  /** True when the capture holds more than was measured. */
  isCut: boolean;
  /** True when the capture ends (or begins) inside a frame and no whole frame was measured. */
  isPartFrame: boolean;
  clockHz: number;
  clockRatio: [p: number, q: number];
  /** The capture's clock against the vector's, less the ratio: positive is too fast. Null where one symbol gives none. */
  clockErrorPpm: number | null;
  clockErrorSigmaPpm: number | null;
  /** True when no clock error stands out of the noise, and none was corrected. */
  isClockShared: boolean;
  /** On top of the document's own frequency offset. */
  offsetHz: number;
  offsetSigmaHz: number | null;
  offsetSubcarriers: number;
  /** The capture's first sample stands so many samples of the file into the frame; negative where a burst begins later. */
  startSamples: number;
  /** From the capture's first sample to the first frame's first sample, s and capture samples; beyond its end where none begins in it. */
  delaySec: number;
  delaySamples: number;
  /** RMS of the measured symbols and largest sample, dB to full scale; the signal's gain, dB full scale per unit of the document. */
  levelDbfs: number;
  peakDbfs: number;
  gainDb: number;
  /** Signal over noise and all other errors in the used cells, before equalizing; null where it could not be measured. */
  snrDb: number | null;
  /** Over the data cells where there are some, else over all known cells; its byInk holds every ink. */
  evm: EvmReport;
  isOverData: boolean;
  channel: ChannelReport;
  nulls: NullPower;
  imbalance: ImbalanceReport;
  constellation: ConstellationPoints;
  /** Samples of the file that the transform's window begins before the useful part. */
  windowAdvanceSamples: number;
  /** Subcarriers that the capture's band does not hold: no figure of them. */
  lostSubcarriers: number;
}

/** Nothing like the edition in the capture: no EVM. */
export interface UnrecognisedCapture {
  kind: 'unrecognised';
  statistics: CaptureStatistics;
  /** The best of all readings. */
  correlation: Correlation;
  best: FoundReading;
  /** Every reading that was tried, best first. */
  tried: (FoundReading & { correlation: number })[];
  /** ρ of each 1/512 of the frame, of the plain reading. */
  curve: Float64Array;
  frameSec: number;
}

/** A capture that cannot be measured at all, with both numbers where there are two. */
export interface RefusedCapture {
  kind: 'refused';
  code: 'tooShort' | 'silent' | 'notNumbers' | 'clock' | 'nothingPainted' | 'noPilots';
  message: string;
}

export type CaptureResult = MeasuredCapture | UnrecognisedCapture | RefusedCapture;
