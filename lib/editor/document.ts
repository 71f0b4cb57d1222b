import { compressGrid, expandGrid } from '@/lib/synth/index';
import type { WaveformAbout, WaveformContent, WaveformDocument, WaveformIntent } from '@/lib/synth/index';
import type { Settings } from './types';

/**
 * The open document: one byte a cell (ink number, symbol by symbol, position p = k + ⌊N/2⌋ within a symbol) and everything
 * else as values. Only applyPatch writes to it; all others read.
 */
export interface EditorDocument {
  settings: Settings;
  cells: Uint8Array;
  about: WaveformAbout;
  intent: WaveformIntent;
}

export function openDocument(stored: WaveformDocument): EditorDocument {
  const { grid, ...settings } = stored.content;
  return { settings, cells: expandGrid(grid, settings.fftSize), about: stored.about, intent: stored.intent };
}

/** The content in its stored form, rows in canonical runs; key order as in a stored document. */
export function contentOf(document: EditorDocument): WaveformContent {
  const { tray, streams, peakReduction, level, markers, ...numbers } = document.settings;
  const grid = compressGrid(document.cells, numbers.fftSize, numbers.symbolCount);
  return { ...numbers, tray, grid, streams, peakReduction, level, markers };
}

/** The whole document in its stored form: what autosave sends and the digest is taken of. */
export function storedDocument(document: EditorDocument): WaveformDocument {
  const content = contentOf(document);
  return { format: 'combwright.waveform', version: 1, about: document.about, content, intent: document.intent };
}

/** The signed subcarrier of position 0. */
export function lowestOf(fftSize: number): number {
  return -Math.floor(fftSize / 2);
}

export function inkAt(document: EditorDocument, position: number, symbol: number): number {
  return document.cells[symbol * document.settings.fftSize + position] ?? 0;
}

/** How many cells each ink of the tray holds. */
export function countCells(document: EditorDocument): number[] {
  const counts = new Array<number>(document.settings.tray.length).fill(0);
  for (let i = 0; i < document.cells.length; i++) {
    const ink = document.cells[i]!;
    counts[ink] = (counts[ink] ?? 0) + 1;
  }
  return counts;
}
