/**
 * The waveform document, the bench profile and their parts as plain types: the vocabulary of the whole program.
 * lib/document holds the same shapes as zod schemas; a type test there keeps the two equal.
 */

/** An exact positive rational [numerator, denominator], reduced, both 1…2^53−1. */
export type Fraction = [numerator: number, denominator: number];

export type Role = 'null' | 'data' | 'pilot' | 'tone' | 'reserved';

export type Constellation = 'bpsk' | 'pi2-bpsk' | 'qpsk' | '16qam' | '64qam' | '256qam' | '1024qam' | '4096qam';

export type BitMap = 'ts38211' | 'ieee80211' | 'en300744';

/** A linear feedback shift register: b(t) = XOR of b(t − tap); the seed's bit i is output bit i. */
export interface PnRegister {
  kind: 'pn';
  stages: number;
  taps: number[];
  seed: number;
  inverted: boolean;
}

export type Sequence =
  | { kind: 'constant' }
  | { kind: 'alternating' }
  | PnRegister
  | { kind: 'gold'; cInit: number; points: 'bpsk' | 'qpsk' }
  | { kind: 'zadoffChu'; length: number; root: number; shift: number }
  | { kind: 'newman'; count: number }
  | { kind: 'schroeder'; count: number }
  | { kind: 'listed'; points: [re: number, im: number][] };

export type Counter = 'cell' | 'symbolCell' | 'subcarrier' | 'symbol';

/** One factor of a pilot's or tone's value: the sequence at index counter + start. */
export interface Factor {
  sequence: Sequence;
  counter: Counter;
  start: number;
}

export interface DataValue {
  constellation: Constellation;
  bitMap: BitMap;
  streamId: string;
}
export interface PilotValue {
  factors: Factor[];
}
export interface ToneValue {
  factors: Factor[];
  phaseDeg: number;
  continuous: boolean;
}

interface InkCommon {
  inkId: string;
  name: string;
  powerDb: number;
}
export type NullInk = InkCommon & { role: 'null'; value: null };
export type ReservedInk = InkCommon & { role: 'reserved'; value: null };
export type DataInk = InkCommon & { role: 'data'; value: DataValue };
export type PilotInk = InkCommon & { role: 'pilot'; value: PilotValue };
export type ToneInk = InkCommon & { role: 'tone'; value: ToneValue };
export type Ink = NullInk | ReservedInk | DataInk | PilotInk | ToneInk;

/** Run-length rows [length, ink, length, ink, …] from k = −⌊N/2⌋ upwards, and the row that each symbol uses. */
export interface RunGrid {
  rows: number[][];
  rowOfSymbol: number[];
}

export type PayloadSource =
  | PnRegister
  | { kind: 'gold'; cInit: number }
  | { kind: 'zeros' }
  | { kind: 'ones' }
  | { kind: 'pattern'; bits: string }
  | { kind: 'uploaded'; name: string; bitCount: number; base64: string };

export interface Stream {
  streamId: string;
  name: string;
  source: PayloadSource;
  fill: 'running' | 'anchored';
  acrossRepeats: 'restart' | 'continue';
}

export interface Timing {
  mode: 'loop' | 'burst';
  repeats: number;
  /** Base-rate samples after each repeat. */
  gapSamples: number;
  /** Output samples once at the end. */
  padSamples: number;
}

export type PeakReduction =
  | { kind: 'none' }
  | { kind: 'clipAndFilter'; targetPaprDb: number; iterations: number }
  | { kind: 'toneReservation'; targetPaprDb: number; iterations: number };

export type LevelReference = 'interpolatedPeak' | 'samplePeak' | 'componentPeak' | 'rms';

export interface Level {
  reference: LevelReference;
  headroomDb: number;
}

export interface Marker {
  name: string;
  at: 'file' | 'repeat' | 'symbol';
  symbol: number | null;
  offsetSamples: number;
  lengthSamples: number;
}

/** All that decides a sample. */
export interface WaveformContent {
  fftSize: number;
  subcarrierSpacingHz: Fraction;
  symbolCount: number;
  prefixSamples: number[];
  overlapSamples: number;
  oversampling: number;
  frequencyOffsetHz: number;
  timing: Timing;
  tray: Ink[];
  grid: RunGrid;
  streams: Stream[];
  peakReduction: PeakReduction;
  level: Level;
  markers: Marker[];
}

export interface WaveformAbout {
  title: string;
  notes: string;
  basedOn: string | null;
}

/** What the author means at the device's connector; decides no sample. */
export interface WaveformIntent {
  outputRmsDbm: number | null;
  lossDb: number;
  devicePeakLimitDbm: number | null;
  deviceMeanLimitDbm: number | null;
  levelToleranceDb: number;
}

export interface WaveformDocument {
  format: 'combwright.waveform';
  version: 1;
  about: WaveformAbout;
  content: WaveformContent;
  intent: WaveformIntent;
}

export type LevelMeans = 'fileRms' | 'activeRms' | 'fullScaleTone' | 'unknown';

/** The limits and the byte layout of one generator. All counts are samples (I/Q pairs). */
export interface BenchContent {
  sampleClockHz: { least: number; most: number; step: number | null };
  word: 'int8' | 'int16' | 'float32';
  bits: number;
  align: 'left' | 'right';
  numberFormat: 'twosComplement' | 'offsetBinary';
  byteOrder: 'little' | 'big';
  layout: 'interleaved' | 'split';
  container: 'raw' | 'wav' | 'npy' | 'csv';
  swapIq: boolean;
  negateQ: boolean;
  granularitySamples: number;
  leastSamples: number;
  mostSamples: number;
  leastHeadroomDb: number;
  levelMeans: LevelMeans;
  markers: { count: number; packing: 'none' | 'bytes' | 'lowBits'; leastSamples: number; stepSamples: number };
  modes: ('loop' | 'burst')[];
  fileName: { most: number; extension: string };
}

export interface BenchProfile {
  format: 'combwright.bench';
  version: 1;
  about: { name: string; notes: string };
  content: BenchContent;
}
