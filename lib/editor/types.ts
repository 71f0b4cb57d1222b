import type {
  Ink,
  Level,
  Marker,
  PeakReduction,
  Stream,
  Timing,
  WaveformAbout,
  WaveformContent,
  WaveformIntent,
} from '@/lib/synth/index';

/** A cell by its place: position p = k + ⌊N/2⌋ (0…N−1, left to right in frequency) and symbol l. */
export interface CellPoint {
  position: number;
  symbol: number;
}

/** A block of cells, all four borders inside. */
export interface CellRect {
  positionFrom: number;
  positionTo: number;
  symbolFrom: number;
  symbolTo: number;
}

/** Run pairs [length, ink, length, ink, …]. */
export type Runs = number[];

/** `symbols` rows from `symbol` on, whose cells from `start` on change alike from `before` to `after` (equal lengths in all). */
export interface CellRows {
  symbol: number;
  symbols: number;
  start: number;
  before: Runs;
  after: Runs;
}

/** Everything of the content but the cells. Values are never mutated: a patch replaces them. */
export type Settings = Omit<WaveformContent, 'grid'>;

/** The numbers that keep the grid's shape. */
export interface Numbers {
  subcarrierSpacingHz: WaveformContent['subcarrierSpacingHz'];
  prefixSamples: number[];
  overlapSamples: number;
  oversampling: number;
  frequencyOffsetHz: number;
  peakReduction: PeakReduction;
}

/** All cells at one size, as the stored form's runs: what a change of N or L keeps for its undoing. */
export interface SizedGrid {
  fftSize: number;
  symbolCount: number;
  rows: Runs[];
  rowOfSymbol: number[];
}

export type Change =
  | { kind: 'cells'; rows: CellRows[] }
  | { kind: 'size'; before: SizedGrid; after: SizedGrid }
  | { kind: 'numbers'; before: Partial<Numbers>; after: Partial<Numbers> }
  | { kind: 'tray'; before: Ink[]; after: Ink[] }
  | { kind: 'streams'; before: Stream[]; after: Stream[] }
  | { kind: 'timing'; before: Timing; after: Timing }
  | { kind: 'level'; before: Level; after: Level }
  | { kind: 'markers'; before: Marker[]; after: Marker[] }
  | { kind: 'about'; before: WaveformAbout; after: WaveformAbout }
  | { kind: 'intent'; before: WaveformIntent; after: WaveformIntent };

/** One step of the history: done in order, undone backwards. The label is what Undo says ("Paint 348 cells"). */
export interface Patch {
  label: string;
  changes: Change[];
}

/**
 * The mapping of a plot area to cells. Zooms are CSS px per cell; `firstPosition` and `firstSymbol` are the (broken)
 * cell coordinates at the area's lowest frequency and first symbol edge. Not turned: subcarriers run to the right,
 * symbols downwards. Turned: symbols run to the right, subcarriers upwards.
 */
export interface Viewport {
  widthPx: number;
  heightPx: number;
  firstPosition: number;
  firstSymbol: number;
  subcarrierPx: number;
  symbolPx: number;
  turned: boolean;
}

/** The size of the grid that a viewport looks at. */
export interface GridSize {
  fftSize: number;
  symbolCount: number;
}

/** Pixels from the plot area's upper left corner. */
export interface ScreenPoint {
  xPx: number;
  yPx: number;
}

/** Cells of one symbol: positions from, from + every, … up to `to`. What every painting kernel gives. */
export interface Span {
  symbol: number;
  from: number;
  to: number;
  every: number;
}

export interface BrushSize {
  subcarriers: number;
  symbols: number;
}

/**
 * The comb's blanks, subcarriers signed: every n-th subcarrier from … to, every m-th symbol from … to, each painted
 * symbol (pass) moved `shift` subcarriers further than the one before, modulo the step.
 */
export interface CombSettings {
  everySubcarrier: number;
  subcarrierFrom: number;
  subcarrierTo: number;
  everySymbol: number;
  symbolFrom: number;
  symbolTo: number;
  shiftPerPass: number;
}

/** The rectangle's blanks, subcarriers signed, borders inside. */
export interface RectangleSettings {
  subcarrierFrom: number;
  subcarrierTo: number;
  symbolFrom: number;
  symbolTo: number;
}

export type ToolName = 'brush' | 'rectangle' | 'comb' | 'pick' | 'pan';
