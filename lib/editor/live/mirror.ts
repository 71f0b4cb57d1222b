import { createCellCensus, createFrameTally } from '@/lib/synth/index';
import type { CellCensus, FrameTally, SampleEngine, WaveformContent, WaveformDocument } from '@/lib/synth/index';
import { openDocument } from '../document';
import type { EditorDocument } from '../document';
import { applyPatch, touchedSymbols } from '../patch';
import type { Patch, Settings } from '../types';
import { createAverageSpectrum } from './averageSpectrum';
import type { AverageSpectrum } from './averageSpectrum';
import { createPilotRows } from './pilotRows';
import type { PilotRows } from './pilotRows';
import { createPlainFrame, refreshFrame } from './plainFrame';
import type { PlainFrame } from './plainFrame';
import { createEditReach } from './touched';
import type { EditReach } from './touched';
import { createWaveform } from './waveform';
import type { Waveform } from './waveform';

/** What is kept of one state of the settings; a change that decides samples makes a new one. */
export interface Kept {
  content: WaveformContent;
  waveform: Waveform;
  frame: FrameTally;
  spectrum: AverageSpectrum;
  census: CellCensus;
  reach: EditReach;
  pilots: PilotRows;
  /** The frame before its peak is lowered; null where it is not. */
  plain: PlainFrame | null;
}

/**
 * The document's double beside the live views: does the page's patches, and synthesizes symbol by symbol what they
 * touched. Figures of the frame come from what is kept of each symbol, so that an edit costs its own symbols whatever
 * the length of the frame.
 */
export interface Mirror {
  readonly document: EditorDocument;
  /** The change count of the last patch. */
  changeCount(): number;
  apply(patch: Patch, changeCount: number): void;
  /** Symbols still to be done. */
  toDo(): number;
  /** Does one symbol; false when none is left. */
  step(): boolean;
  kept(): Kept;
}

/** Settings that decide no sample: marks, words and limits. */
function isAudible(before: Settings, after: Settings): boolean {
  const quiet = { level: after.level, markers: after.markers };
  return JSON.stringify({ ...before, ...quiet }) !== JSON.stringify(after);
}

/** The content for synthesis, its cells given apart. */
function bareContent(settings: Settings): WaveformContent {
  return { ...settings, grid: { rows: [], rowOfSymbol: [] } };
}

export function createMirror(stored: WaveformDocument, startCount: number, engine?: SampleEngine): Mirror {
  const document = openDocument(stored);
  let count = startCount;
  let kept: Kept | null = null;
  /** Symbols whose own values moved, whose tally and whose segments are out of date. */
  let isStale = new Uint8Array(0);
  let staleCount = 0;
  let cursor = 0;
  /** The same of the frame before its peak is lowered: done first, since the limit stands over its mean. */
  let isPlainStale = new Uint8Array(0);
  let plainStaleCount = 0;
  let plainCursor = 0;
  let plainMean = 0;

  const rowOf = (symbol: number) => {
    const { fftSize } = document.settings;
    return document.cells.subarray(symbol * fftSize, (symbol + 1) * fftSize);
  };

  function markStale(symbol: number | null): void {
    if (symbol === null) return;
    staleCount += 1 - isStale[symbol]!;
    isStale[symbol] = 1;
    if (!kept?.plain) return;
    plainStaleCount += 1 - isPlainStale[symbol]!;
    isPlainStale[symbol] = 1;
  }

  /** A moved symbol, and its neighbours: its suffix falls into the next prefix, segments before it reach into it. */
  function markMoved(symbol: number): void {
    const { waveform, plain } = keep();
    waveform.forget(symbol);
    plain?.waveform.forget(symbol);
    markStale(symbol);
    markStale(waveform.previousOf(symbol));
    if (waveform.overlapSamples > 0) markStale(waveform.nextOf(symbol));
  }

  /** What reads the tray beside the cells; the frame's tallies and segments do not. */
  function readings(): Omit<Kept, 'frame' | 'spectrum'> {
    const { settings, cells } = document;
    const content = bareContent(settings);
    const reach = createEditReach(settings);
    const pilots = createPilotRows(settings);
    for (let symbol = 0; symbol < settings.symbolCount; symbol++) {
      reach.note(symbol, rowOf(symbol));
      pilots.note(symbol, rowOf(symbol));
    }
    return {
      content,
      plain: createPlainFrame(content, cells, engine),
      waveform: createWaveform(content, cells, engine, () => plainMean),
      census: createCellCensus(content, cells),
      reach,
      pilots,
    };
  }

  /** Everything anew. Made when it is asked for: settings that come in one message after another cost once. */
  function keep(): Kept {
    if (kept) return kept;
    const { settings } = document;
    const fresh = readings();
    const [numerator, denominator] = settings.subcarrierSpacingHz;
    const clockHz = (numerator / denominator) * settings.fftSize * settings.oversampling;
    const stale = () => new Uint8Array(settings.symbolCount).fill(1);
    isStale = stale();
    staleCount = settings.symbolCount;
    cursor = 0;
    isPlainStale = stale();
    plainStaleCount = fresh.plain ? settings.symbolCount : 0;
    plainCursor = 0;
    kept = {
      ...fresh,
      frame: createFrameTally(settings.symbolCount + 1),
      spectrum: createAverageSpectrum(
        fresh.waveform.usefulSamples,
        settings.symbolCount,
        clockHz,
        settings.frequencyOffsetHz / clockHz,
      ),
    };
    return kept;
  }

  function applyCells(patch: Patch): void {
    // Nothing kept yet: all is made of the new cells when it is asked for.
    if (!kept) return applyPatch(document, patch);
    const { reach, census, pilots, waveform, plain } = kept;
    const before = new Map<number, Uint8Array>();
    for (const change of patch.changes) {
      if (change.kind !== 'cells') continue;
      for (const [from, to] of touchedSymbols(change))
        for (let symbol = from; symbol <= to; symbol++)
          if (!before.has(symbol)) before.set(symbol, rowOf(symbol).slice());
    }
    applyPatch(document, patch);
    const later = new Uint8Array(document.settings.symbolCount);
    for (const [symbol, row] of before) {
      const after = rowOf(symbol);
      reach.note(symbol, after);
      pilots.note(symbol, after);
      census.replaceSymbol(row, after);
      waveform.touch(symbol);
      plain?.waveform.touch(symbol);
    }
    for (const [symbol, row] of before) {
      reach.markLater(symbol, row, rowOf(symbol), later);
      later[symbol] = 1;
    }
    later.forEach((isMoved, symbol) => {
      if (isMoved === 1) markMoved(symbol);
    });
  }

  /** True when a patch of tray and streams leaves every painted cell as it sounds: a new ink, another unused one. */
  function spareInksOnly(before: Settings, after: Settings, { census }: Kept): boolean {
    if (isAudible({ ...before, tray: after.tray, streams: after.streams }, after)) return false;
    // Patches come as copies: values are compared, not references.
    const isHeld = (a: unknown, b: unknown) => JSON.stringify(a) === JSON.stringify(b);
    if (!before.streams.every((stream, at) => isHeld(stream, after.streams[at]))) return false;
    const inks = Math.max(before.tray.length, after.tray.length);
    for (let ink = 0; ink < inks; ink++)
      if (census.cellsOfInk[ink] !== 0 && !isHeld(before.tray[ink], after.tray[ink])) return false;
    return true;
  }

  function applyWhole(patch: Patch): void {
    const { settings, cells } = document;
    applyPatch(document, patch);
    if (!kept) return;
    const isMoved = document.cells !== cells || patch.changes.some(({ kind }) => kind === 'cells');
    if (!isMoved && !isAudible(settings, document.settings)) kept.content = bareContent(document.settings);
    else if (!isMoved && !kept.plain && spareInksOnly(settings, document.settings, kept))
      kept = { ...kept, ...readings() };
    else kept = null;
  }

  /** One symbol of the frame before its peak is lowered; after the last one, all symbols are lowered anew if their limit moved. */
  function stepPlain({ plain, waveform }: Kept): void {
    while (isPlainStale[plainCursor] !== 1) plainCursor = plainCursor + 1 < isPlainStale.length ? plainCursor + 1 : 0;
    plain!.refresh(plainCursor);
    isPlainStale[plainCursor] = 0;
    plainStaleCount--;
    if (plainStaleCount > 0 || plain!.meanPower() === plainMean) return;
    plainMean = plain!.meanPower();
    for (let symbol = 0; symbol < isStale.length; symbol++) waveform.forget(symbol);
    isStale.fill(1);
    staleCount = isStale.length;
  }

  return {
    document,
    changeCount: () => count,
    apply(patch, changeCount) {
      count = changeCount;
      if (patch.changes.every(({ kind }) => kind === 'cells')) applyCells(patch);
      else applyWhole(patch);
    },
    toDo() {
      keep();
      return staleCount + plainStaleCount;
    },
    step() {
      const now = keep();
      if (plainStaleCount > 0) {
        stepPlain(now);
        return true;
      }
      if (staleCount === 0) return false;
      while (isStale[cursor] !== 1) cursor = cursor + 1 < isStale.length ? cursor + 1 : 0;
      const symbol = cursor;
      refreshFrame(now.frame, now.waveform, symbol, document.settings);
      now.spectrum.refresh(symbol, now.waveform);
      isStale[symbol] = 0;
      staleCount--;
      return staleCount > 0;
    },
    kept: keep,
  };
}
