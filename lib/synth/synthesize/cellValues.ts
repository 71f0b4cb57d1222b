import { demand, SynthError } from '../errors';
import { demandWholeRows, expandGrid, lowestSubcarrier } from '../grid/grid';
import { createRootsOfUnity } from '../math/turns';
import { createBitSource } from '../sequences/bitSource';
import type { WaveformContent } from '../types';
import { createBitWindow, type BitWindow } from './bitWindow';
import { rowsOfGrid, runsOfCells, runsOfGrid, type CellRuns } from './cellRuns';
import { createCellCounts } from './counts';
import { planInks, type InkPlan } from './inkPlan';
import { frameLayout } from './layout';
import { mapHalfTurningRun, mapRun } from './mapRun';
import type { CellValues, FrameLayout } from './types';

const ANCHOR_BITS = 12; // an anchored cell's place in its source: room for 4096-QAM

/** Where position p of a symbol goes: out[2·(low + p)] for p < split, then out[2·(high + p)]. */
export interface Placement {
  split: number;
  low: number;
  high: number;
}

/** Takes runs of payload cells instead of their points being written at once. */
export interface RunSink {
  /** `count` cells of an ink go to out[2·to…]: cell i takes its bits at offset + i·step of the window's words. */
  take(ink: number, window: BitWindow, offset: number, step: number, to: number, count: number, parity: number): void;
}

/** What the renderer needs beside CellValues: values straight into a transform's input. */
export interface PlacedValues extends CellValues {
  readonly inks: readonly InkPlan[];
  /** As CellRuns.rowOf: symbols of one row differ in no silent cell. */
  rowOf(symbol: number): number;
  /**
   * Whether all painted cells of a row are payload of running streams on points that do not turn: symbols of it that follow each
   * other in a repeat differ in where their bits begin, each stream's behind the last one's.
   */
  isSteadyRow(row: number): boolean;
  /** Positions first…end−1 hold every cell that may not be silent. */
  readonly painted: { first: number; end: number };
  /** Writes the values of the symbol's cells that are not silent (payload cells: to `sink`, where given); all others must be 0. */
  writePlaced(repeat: number, symbol: number, out: Float64Array, placement: Placement, sink?: RunSink): void;
}

/**
 * The values of a content's cells. `cells` (L·N ink numbers, kept by reference and never changed here) replaces the
 * content's grid. Every value is multiplied by `gain`.
 * Values as they are meant: no peak reduction. Throws SynthError `bad_content`, `bad_size`.
 */
export function createPlacedValues(
  content: WaveformContent,
  givenCells: Uint8Array | undefined,
  gain: number,
): PlacedValues {
  const { fftSize, symbolCount, streams, timing, tray } = content;
  if (givenCells === undefined) demandWholeRows(content.grid, fftSize);
  const rowCount = givenCells === undefined ? content.grid.rowOfSymbol.length : givenCells.length / fftSize;
  demand(rowCount === symbolCount, 'bad_size', 'Cells do not fill the grid.');
  let expanded = givenCells;
  const cellsNow = (): Uint8Array => (expanded ??= expandGrid(content.grid, fftSize)); // most renderings never ask
  const inks = planInks(content, gain);
  const rows = givenCells === undefined ? rowsOfGrid(content.grid) : [];
  const openRuns = () => (givenCells === undefined ? runsOfGrid(content.grid, rows) : runsOfCells(givenCells, fftSize));
  const cellRuns = openRuns();
  const counts = createCellCounts(openRuns(), symbolCount, inks); // of its own: it counts while runs are in use
  let baseLayout: FrameLayout | null = null;
  const atBaseRate = (): FrameLayout =>
    (baseLayout ??= frameLayout({ ...content, oversampling: 1, timing: { ...timing, padSamples: 0 } }, 1));
  const windows: (BitWindow | undefined)[] = streams.map(() => undefined);
  const taken = new Float64Array(streams.length); // next bit of each running stream
  const inkTaken = new Float64Array(tray.length); // next `cell` number of each ink
  const inSymbol = new Int32Array(tray.length); // cells of each ink so far in this symbol
  let values: Float64Array = new Float64Array(0); // room for values with factors
  const lowest = lowestSubcarrier(fftSize);
  let roots: Float64Array | null = null;
  const natural: Placement = { split: fftSize, low: 0, high: 0 };

  function windowOf(stream: number): BitWindow {
    return (windows[stream] ??= createBitWindow(createBitSource(streams[stream]!.source)));
  }

  /** Source bit of the first cell (running), or of position 0 (anchored), of a symbol. */
  function firstBitOf(stream: number, repeat: number, symbol: number): number {
    const { fill, acrossRepeats } = streams[stream]!;
    const counted = acrossRepeats === 'continue' ? repeat : 0;
    if (fill === 'anchored') return ANCHOR_BITS * (counted * symbolCount + symbol) * fftSize;
    const before = counts.bitsBefore(symbol, stream);
    return counted === 0 ? before : before + counted * counts.bitsBefore(symbolCount, stream);
  }

  /** Sets the running counters to the symbol's beginning, for the inks that stand in it. */
  const isReady = new Uint8Array(tray.length);
  const isStreamReady = new Uint8Array(streams.length);
  function prepare(ink: number, plan: InkPlan, repeat: number, symbol: number): void {
    isReady[ink] = 1;
    inSymbol[ink] = 0;
    if (plan.kind === 'data') {
      if (isStreamReady[plan.stream] === 0) {
        taken[plan.stream] = firstBitOf(plan.stream, repeat, symbol);
        isStreamReady[plan.stream] = 1;
      }
      if (plan.isHalfTurning && streams[plan.stream]!.fill === 'running')
        inkTaken[ink] = counts.cellsBefore(symbol, ink);
    } else if (plan.kind === 'value' && plan.needsCellCount) inkTaken[ink] = counts.cellsBefore(symbol, ink);
  }

  function writeData(
    ink: number,
    plan: InkPlan & { kind: 'data' },
    p: number,
    count: number,
    out: Float64Array,
    to: number,
    sink: RunSink | undefined,
  ): void {
    const window = windowOf(plan.stream);
    const isRunning = streams[plan.stream]!.fill === 'running';
    const step = isRunning ? plan.bits : ANCHOR_BITS;
    const start = isRunning ? taken[plan.stream]! : taken[plan.stream]! + ANCHOR_BITS * p;
    const offset = window.hold(start, start + step * count);
    const index = isRunning ? inkTaken[ink]! : p;
    if (sink !== undefined) sink.take(ink, window, offset, step, to, count, plan.isHalfTurning ? index % 2 : -1);
    else if (plan.isHalfTurning) mapHalfTurningRun(window.words, offset, step, plan.points, index, out, to, count);
    else mapRun(window.words, offset, step, plan.bits, plan.points, out, to, count);
    if (plan.isHalfTurning) inkTaken[ink]! += count;
    if (isRunning) taken[plan.stream]! += step * count;
  }

  function writeValues(
    ink: number,
    plan: InkPlan & { kind: 'value' },
    repeat: number,
    symbol: number,
    p: number,
    count: number,
    out: Float64Array,
    to: number,
  ): void {
    if (values.length === 0) values = new Float64Array(2 * fftSize);
    for (let i = 0; i < count; i++) {
      values[2 * i] = plan.re;
      values[2 * i + 1] = plan.im;
    }
    for (const { sequence, counter, start } of plan.factors) {
      const index =
        start +
        (counter === 'cell'
          ? inkTaken[ink]!
          : counter === 'symbolCell'
            ? inSymbol[ink]!
            : counter === 'subcarrier'
              ? p
              : symbol);
      if (index < 0) throw new SynthError('bad_index', `Ink ${tray[ink]!.name} counts below zero in symbol ${symbol}.`);
      sequence.multiplyInto(index, counter === 'symbol' ? 0 : 1, count, values, 0);
    }
    if (plan.isContinuous) turnContinuously(repeat, symbol, p, count);
    inkTaken[ink]! += count;
    inSymbol[ink]! += count;
    for (let i = 0, at = 2 * to; i < count; i++, at += 2) {
      out[at] = values[2 * i]! + 0; // no negative zeros
      out[at + 1] = values[2 * i + 1]! + 0;
    }
  }

  /** Times e^{j2πk·s/N}, s the useful part's first base-rate sample in the file: the sine runs on. */
  function turnContinuously(repeat: number, symbol: number, p: number, count: number): void {
    roots ??= createRootsOfUnity(fftSize);
    const base = atBaseRate();
    const place = repeat * base.repeatSamples + base.symbolStarts[symbol]! + base.prefixes[symbol]!;
    const start = place % fftSize;
    for (let i = 0; i < count; i++) {
      const turns = ((p + i + lowest) * start) % fftSize;
      const root = 2 * (turns < 0 ? turns + fftSize : turns);
      const re = values[2 * i]!;
      const im = values[2 * i + 1]!;
      values[2 * i] = re * roots[root]! - im * roots[root + 1]!;
      values[2 * i + 1] = re * roots[root + 1]! + im * roots[root]!;
    }
  }

  function writePart(
    ink: number,
    plan: InkPlan,
    repeat: number,
    symbol: number,
    p: number,
    end: number,
    out: Float64Array,
    origin: number,
    sink: RunSink | undefined,
  ): void {
    if (plan.kind === 'data') writeData(ink, plan, p, end - p, out, origin + p, sink);
    else if (plan.kind === 'value') writeValues(ink, plan, repeat, symbol, p, end - p, out, origin + p);
  }

  function writePlaced(repeat: number, symbol: number, out: Float64Array, placement: Placement, sink?: RunSink): void {
    const { split, low, high } = placement;
    isReady.fill(0);
    isStreamReady.fill(0);
    const runs = cellRuns.of(symbol);
    const { numbers } = cellRuns;
    for (let i = 0, p = 0; i < numbers; i += 2) {
      const end = runs[i]!;
      const ink = runs[i + 1]!;
      const plan = inks[ink];
      if (plan === undefined) throw new SynthError('bad_content', `The tray has no ink ${ink}.`);
      if (plan.kind !== 'silent') {
        if (isReady[ink] === 0) prepare(ink, plan, repeat, symbol);
        if (p < split) writePart(ink, plan, repeat, symbol, p, Math.min(end, split), out, low, sink);
        if (end > split) writePart(ink, plan, repeat, symbol, Math.max(p, split), end, out, high, sink);
      }
      p = end;
    }
  }

  /** Calls `visit` for each payload cell of the stream (or of all: −1) in fill order with its first source bit. */
  function eachPayloadCell(
    stream: number,
    repeat: number,
    symbol: number,
    visit: (p: number, firstBit: number, bits: number, cellStream: number) => void,
  ): void {
    const cells = cellsNow();
    const from = symbol * fftSize;
    const next = streams.map((_, number) => (stream < 0 || number === stream ? firstBitOf(number, repeat, symbol) : 0));
    for (let p = 0; p < fftSize; p++) {
      const plan = inks[cells[from + p]!]!;
      if (plan.kind !== 'data' || (stream >= 0 && plan.stream !== stream)) continue;
      if (streams[plan.stream]!.fill === 'anchored')
        visit(p, next[plan.stream]! + ANCHOR_BITS * p, plan.bits, plan.stream);
      else {
        visit(p, next[plan.stream]!, plan.bits, plan.stream);
        next[plan.stream]! += plan.bits;
      }
    }
  }

  function computeRepeatAlike(): boolean {
    if (timing.repeats === 1) return true;
    const turn = atBaseRate().repeatSamples % fftSize;
    const varies = inks.map((plan) => {
      if (plan.kind === 'data') return streams[plan.stream]!.acrossRepeats === 'continue' ? 1 : 0;
      return plan.kind === 'value' && plan.isContinuous && turn !== 0 ? 2 : 0;
    });
    if (varies.every((kind) => kind === 0)) return true;
    for (let symbol = 0; symbol < symbolCount; symbol++) {
      const runs = cellRuns.of(symbol);
      const { numbers } = cellRuns;
      for (let i = 0, p = 0; i < numbers; p = runs[i]!, i += 2) {
        const kind = varies[runs[i + 1]!]!;
        if (kind === 1) return false;
        if (kind === 2) for (; p < runs[i]!; p++) if (((p + lowest) * turn) % fftSize !== 0) return false;
      }
    }
    return true;
  }

  /** By row: whether it is steady, as far as it has been asked. */
  const steady: (boolean | undefined)[] = [];
  function isSteadyRow(row: number): boolean {
    if (givenCells !== undefined) return false;
    return (steady[row] ??= content.grid.rows[row]!.every((number, i) => {
      const plan = i % 2 === 1 ? inks[number] : undefined;
      if (plan === undefined || plan.kind === 'silent') return true;
      return plan.kind === 'data' && !plan.isHalfTurning && streams[plan.stream]!.fill === 'running';
    }));
  }

  return {
    content,
    isSteadyRow,
    get cells() {
      return cellsNow();
    },
    inks,
    rowOf: cellRuns.rowOf,
    painted: givenCells === undefined ? paintedPart(cellRuns, content, inks) : { first: 0, end: fftSize },
    writePlaced,
    write(repeat, symbol, out) {
      demand(out.length >= 2 * fftSize, 'buffer_too_small', 'A symbol has 2·N numbers.');
      out.fill(0, 0, 2 * fftSize);
      writePlaced(repeat, symbol, out, natural);
    },
    bitsPerRepeat: (stream) => counts.bitsBefore(symbolCount, stream),
    bitsOfSymbol: (stream, symbol) => counts.bitsBefore(symbol + 1, stream) - counts.bitsBefore(symbol, stream),
    readBits(stream, repeat, symbol, out) {
      const window = windowOf(stream);
      let written = 0;
      if (streams[stream]!.fill === 'running') {
        // the cells take them as they come
        const count = counts.bitsBefore(symbol + 1, stream) - counts.bitsBefore(symbol, stream);
        const first = firstBitOf(stream, repeat, symbol);
        const from = window.hold(first, first + count);
        for (let i = from; i < from + count; i++) out[written++] = (window.words[i >>> 5]! >>> (31 - (i & 31))) & 1;
        return written;
      }
      eachPayloadCell(stream, repeat, symbol, (_p, firstBit, bits) => {
        const offset = window.hold(firstBit, firstBit + bits);
        for (let i = offset; i < offset + bits; i++) out[written++] = (window.words[i >>> 5]! >>> (31 - (i & 31))) & 1;
      });
      return written;
    },
    firstBits(repeat, symbol, out) {
      out.fill(-1, 0, fftSize);
      eachPayloadCell(-1, repeat, symbol, (p, firstBit) => (out[p] = firstBit));
    },
    get isRepeatAlike() {
      return computeRepeatAlike();
    },
    touch: counts.touch,
  };
}

/** Where the grid's rows have cells that are not silent. */
function paintedPart(runs: CellRuns, { fftSize, grid }: WaveformContent, inks: readonly InkPlan[]) {
  let first = fftSize;
  let end = 0;
  const seen = new Uint8Array(grid.rows.length);
  for (let symbol = 0; symbol < grid.rowOfSymbol.length; symbol++) {
    const rowNumber = grid.rowOfSymbol[symbol]!;
    if (seen[rowNumber] === 1) continue;
    seen[rowNumber] = 1;
    const row = runs.of(symbol);
    for (let i = 0, start = 0; i < row.length; i += 2) {
      if (inks[row[i + 1]!]?.kind !== 'silent') {
        first = Math.min(first, start);
        end = Math.max(end, row[i]!);
      }
      start = row[i]!;
    }
  }
  return { first: Math.min(first, end), end };
}

/** The values of a content's cells, as CellValues describes; see createPlacedValues for what it throws. */
export function createCellValues(content: WaveformContent, cells?: Uint8Array): CellValues {
  return createPlacedValues(content, cells, 1);
}
