/**
 * The waveform document, the bench profile and their parts as plain types: the vocabulary of the whole program.
 * lib/document holds the same shapes as zod schemas; a type test there keeps the two equal.
 */

/** An exact positive rational [numerator, denominator], reduced, both 1…2^53−1. */
export type Fraction = [numerator: number, denominator: number];

/** What a cell is painted with: nothing, payload bits, values that a receiver knows, a sine, or room for peak reduction. */
export type Role = 'null' | 'data' | 'pilot' | 'tone' | 'reserved';

/** Points of a data cell; 1, 1, 2, 4, 6, 8, 10 and 12 bits. Mean power 1. */
export type Constellation = 'bpsk' | 'pi2-bpsk' | 'qpsk' | '16qam' | '64qam' | '256qam' | '1024qam' | '4096qam';

/** Which words stand at which points: TS 38.211 5.1, IEEE Std 802.11 17.3.5.8, EN 300 744 4.3.5. */
export type BitMap = 'ts38211' | 'ieee80211' | 'en300744';

/** A linear feedback shift register: b(t) = XOR of b(t − tap); the seed's bit i is output bit i. */
export interface PnRegister {
  kind: 'pn';
  /** 2…31. */
  stages: number;
  /** 1…8, ascending and distinct; the last is `stages`. */
  taps: number[];
  /** 1…2^stages − 1. */
  seed: number;
  inverted: boolean;
}

/**
 * Values by an index i ≥ 0. cInit 0…2^31−1; length 2…65536, root coprime to it, 0 ≤ shift < length; count 1…2^20; points 1…65536, each
 * part within ±100, taken as written and round again. All others have magnitude 1.
 */
export type Sequence =
  | { kind: 'constant' }
  | { kind: 'alternating' }
  | PnRegister
  | { kind: 'gold'; cInit: number; points: 'bpsk' | 'qpsk' }
  | { kind: 'zadoffChu'; length: number; root: number; shift: number }
  | { kind: 'newman'; count: number }
  | { kind: 'schroeder'; count: number }
  | { kind: 'listed'; points: [re: number, im: number][] };

/** What a factor counts, from 0 in each repeat: the ink's cells, those within the symbol, the position k + ⌊N/2⌋, or the symbol. */
export type Counter = 'cell' | 'symbolCell' | 'subcarrier' | 'symbol';

/** One factor of a pilot's or tone's value: the sequence at index counter + start. */
export interface Factor {
  sequence: Sequence;
  counter: Counter;
  /** −2^31…2^31−1; the index of a painted cell is never negative. */
  start: number;
}

/** A data cell's points, and the stream whose bits it takes. */
export interface DataValue {
  constellation: Constellation;
  bitMap: BitMap;
  streamId: string;
}

/** The product of 1…3 factors. */
export interface PilotValue {
  factors: Factor[];
}

/** The product of 0…3 factors, turned by phaseDeg (±360); continuous: e^{j2πk·s/N} more, s the useful part's start at the base rate. */
export interface ToneValue {
  factors: Factor[];
  phaseDeg: number;
  continuous: boolean;
}

interface InkCommon {
  /** `k0`…`k63`, its place in the tray. */
  inkId: string;
  name: string;
  /** −60…20, over |a|² = 1 on average. */
  powerDb: number;
}

/** Ink 0 of every tray: nothing is sent. */
export type NullInk = InkCommon & { role: 'null'; value: null };
/** Nothing is meant here; peak reduction may fill it. */
export type ReservedInk = InkCommon & { role: 'reserved'; value: null };
/** Cells that carry bits of a stream. */
export type DataInk = InkCommon & { role: 'data'; value: DataValue };
/** Cells whose values a receiver knows. */
export type PilotInk = InkCommon & { role: 'pilot'; value: PilotValue };
/** Cells that make sines. */
export type ToneInk = InkCommon & { role: 'tone'; value: ToneValue };
/** One of the tray's 1…64 inks. */
export type Ink = NullInk | ReservedInk | DataInk | PilotInk | ToneInk;

/** Run-length rows [length, ink, length, ink, …] from k = −⌊N/2⌋ upwards, and the row that each symbol uses. */
export interface RunGrid {
  rows: number[][];
  rowOfSymbol: number[];
}

/** Bits of a stream, without end: a finite source begins again. `bits`: 1…4096 of 0 and 1; uploads most significant bit first, RFC 4648 §4. */
export type PayloadSource =
  | PnRegister
  | { kind: 'gold'; cInit: number }
  | { kind: 'zeros' }
  | { kind: 'ones' }
  | { kind: 'pattern'; bits: string }
  | { kind: 'uploaded'; name: string; bitCount: number; base64: string };

/**
 * Bits for data cells. running: the stream's cells take the next bits, symbols in order, subcarriers upwards. anchored: a cell's first bit is
 * 12·((r·L + l)·N + k + ⌊N/2⌋), r = 0 where repeats restart.
 */
export interface Stream {
  streamId: string;
  name: string;
  source: PayloadSource;
  fill: 'running' | 'anchored';
  acrossRepeats: 'restart' | 'continue';
}

/** How often the frame stands in the file, and what follows it. A loop wraps what runs past its end, a burst keeps it. */
export interface Timing {
  mode: 'loop' | 'burst';
  /** 1…65536. */
  repeats: number;
  /** Base-rate samples after each repeat. */
  gapSamples: number;
  /** Output samples once at the end. */
  padSamples: number;
}

/** A step of rendering, values to values, symbol by symbol: target 3…20 dB over the frame's mean power before it, 1…1000 passes. */
export type PeakReduction =
  | { kind: 'none' }
  | { kind: 'clipAndFilter'; targetPaprDb: number; iterations: number }
  | { kind: 'toneReservation'; targetPaprDb: number; iterations: number };

/** What the scale puts at full scale less the headroom: a magnitude peak, the largest |I| or |Q|, or the RMS of the whole file. */
export type LevelReference = 'interpolatedPeak' | 'samplePeak' | 'componentPeak' | 'rms';

/** How samples become words. */
export interface Level {
  reference: LevelReference;
  /** 0…60. */
  headroomDb: number;
}

/** A mark beside the samples: `lengthSamples` ≥ 1 output samples from `offsetSamples` (±2^31) after the first of file, repeat or symbol. */
export interface Marker {
  name: string;
  at: 'file' | 'repeat' | 'symbol';
  /** With `at` symbol: one of them, or null for each. */
  symbol: number | null;
  offsetSamples: number;
  lengthSamples: number;
}

/** All that decides a sample. */
export interface WaveformContent {
  /** N: 16…16384, factors 2, 3 and 5. */
  fftSize: number;
  /** Δf, at most 1 GHz; the clock is N · M · Δf, exactly. */
  subcarrierSpacingHz: Fraction;
  /** L: 1…16384, N·L ≤ 2^23. */
  symbolCount: number;
  /** 1…L entries of 0…N base-rate samples, used cyclically. */
  prefixSamples: number[];
  /** W: 0…the shortest prefix, base rate. */
  overlapSamples: number;
  /** M: 1…16. */
  oversampling: number;
  /** f0, at most half the clock either way. */
  frequencyOffsetHz: number;
  timing: Timing;
  tray: Ink[];
  grid: RunGrid;
  /** Up to 8. */
  streams: Stream[];
  peakReduction: PeakReduction;
  level: Level;
  /** Up to 4. */
  markers: Marker[];
}

/** What people read of a waveform; decides no sample. */
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

/** The file that is stored, reviewed and packed. */
export interface WaveformDocument {
  format: 'combwright.waveform';
  version: 1;
  about: WaveformAbout;
  content: WaveformContent;
  intent: WaveformIntent;
}

/** What a generator's level setting means: the RMS of the file, of its active part, 0 dBFS, or nobody knows. */
export type LevelMeans = 'fileRms' | 'activeRms' | 'fullScaleTone' | 'unknown';

/** The limits and the byte layout of one generator. All counts are samples (I/Q pairs). */
export interface BenchContent {
  sampleClockHz: { least: number; most: number; step: number | null };
  word: 'int8' | 'int16' | 'float32';
  /** 8…16; 8 for int8, 16 for floats. */
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

/** A bench profile as it is stored. */
export interface BenchProfile {
  format: 'combwright.bench';
  version: 1;
  about: { name: string; notes: string };
  content: BenchContent;
}
