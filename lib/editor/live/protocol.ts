import type { BenchContent, WaveformDocument } from '@/lib/synth/index';
import type { Patch } from '../types';
import type { PeakAsk, PeakProgress, PeakResult } from './peakJob';

/** What the views want to see; the worker measures no more than this. */
export interface LiveView {
  /** The symbol of the time view. */
  symbol: number;
  /** Columns of the time plot in device-independent px; traces hold at most two values a column. */
  timeWidthPx: number;
  /** The part of the symbol that the time plot shows, in base-rate samples from its useful start (−N_cp…N); null: all. */
  timeRange: { from: number; to: number } | null;
  /** Columns of the spectrum and the positions (broken, 0…N) that it shows, the grid's own zoom. */
  spectrumWidthPx: number;
  positionRange: { from: number; to: number };
  /** The ink of the constellation. */
  ink: number;
}

/** Page → worker. Patches are numbered without a hole from 1 after each `open`; a hole makes the worker ask for the document. */
export type LiveRequest =
  | { kind: 'open'; document: WaveformDocument; changeCount: number; view: LiveView }
  | { kind: 'patch'; sequence: number; changeCount: number; patch: Patch }
  | { kind: 'view'; view: LiveView }
  | { kind: 'digest'; requestId: number; bench: BenchContent }
  /** A way to a lower peak, tried on a copy of the document while it goes on being drawn. */
  | { kind: 'peak'; requestId: number; document: WaveformDocument; ask: PeakAsk }
  | { kind: 'peakCancel'; requestId: number };

/** Lowest and highest value of each column, left to right: no peak is skipped. */
export interface MinMaxTrace {
  min: Float32Array;
  max: Float32Array;
}

/** The chosen symbol with its prefix, on the interpolated waveform (M′ samples a base sample), without ramps. */
export interface TimeTrace {
  symbol: number;
  /** Base-rate samples of the prefix and of the useful part; sample 0 is the useful part's first. */
  prefixSamples: number;
  usefulSamples: number;
  from: number;
  to: number;
  /** |x| over the symbol's own RMS, and I and Q over it too; all zero where the symbol is silent. */
  envelope: MinMaxTrace;
  i: MinMaxTrace;
  q: MinMaxTrace;
  /** The part whose copy the prefix is: the last prefixSamples of the useful part. */
  tail: { from: number; to: number };
  /** Where the symbol is highest (base-rate samples, broken) and its height over RMS; null where silent. */
  peak: { at: number; ratio: number } | null;
  paprDb: number | null;
}

/** Density in dB against that of a cell of 0 dB, by column over the shown positions. */
export interface SpectrumTrace {
  from: number;
  to: number;
  db: MinMaxTrace;
  rbwHz: number;
  /** "Welch, Blackman–Harris window of 2048 samples, of the rendered samples". */
  recipe: string;
}

export interface CcdfTrace {
  thresholdsDb: Float32Array;
  /** Part of the samples above each threshold; Gaussian: e^(−10^(dB/10)). */
  probability: Float32Array;
  gaussian: Float32Array;
  /** The threshold that one sample in a thousand passes; null when nothing is painted. */
  atOneInThousandDb: number | null;
}

export interface ConstellationTrace {
  ink: number;
  /** Interleaved I, Q without the ink's power: at most CONSTELLATION_POINTS_MOST points. */
  points: Float32Array;
  /** Cells of the ink in the frame. */
  cells: number;
}

/** One row of the title block; value and unit stand apart. `value` null: nothing to tell yet. */
export interface LiveFigure {
  id: FigureId;
  name: string;
  value: number | null;
  unit: string;
  /** What the figure is of, where its name does not say it: "of repeat 1 of 250", "one-sided". */
  note: string | null;
}

export type FigureId =
  | 'paprFrame'
  | 'paprSymbol'
  | 'rms'
  | 'sampleClock'
  | 'loadedBand'
  | 'paintedSpan'
  | 'occupiedBand'
  | 'symbolTime'
  | 'frameTime'
  | 'bitsPerFrame'
  | 'bitRate'
  | 'efficiency'
  | 'prefixOverhead'
  | 'pilotOverhead'
  | 'usableGuard'
  | 'delayReach'
  | 'dopplerReach';

/** All that the views show, of one state of the document. */
export interface LiveResult {
  /** The state measured: compare with the session's changeCount; a difference means stale. */
  changeCount: number;
  /** PAPR of each symbol in dB; NaN where a symbol is silent. */
  symbolPaprDb: Float32Array;
  /** The same before the document's peak reduction; null where it has none. */
  symbolPaprBeforeDb: Float32Array | null;
  /** The symbol with the highest peak over the frame's mean; null when nothing is painted. */
  worstSymbol: number | null;
  time: TimeTrace | null;
  spectrum: SpectrumTrace | null;
  ccdf: CcdfTrace | null;
  constellation: ConstellationTrace | null;
  figures: LiveFigure[];
  /** Symbols synthesized for this answer: what an edit touched. */
  symbolsDone: number;
}

/** Worker → page. */
export type LiveAnswer =
  | { kind: 'result'; result: LiveResult }
  | { kind: 'progress'; changeCount: number; symbolsDone: number; symbolsToDo: number }
  | { kind: 'documentWanted' }
  | { kind: 'digest'; requestId: number; changeCount: number; sha256: string; bytes: number }
  | { kind: 'digestFailed'; requestId: number; message: string }
  | { kind: 'peakProgress'; requestId: number; progress: PeakProgress }
  | { kind: 'peakDone'; requestId: number; result: PeakResult }
  | { kind: 'peakFailed'; requestId: number; message: string }
  | { kind: 'failed'; message: string };

export const CONSTELLATION_POINTS_MOST = 4096;
