import { parseWaveformDocument } from '@/lib/document/parse';
import { formatInteger } from '@/lib/drawing/quantities';
import type { WaveformAbout, WaveformIntent } from '@/lib/synth/index';
import type { EditorDocument } from '../document';
import { gridRefusal } from '../indexRule';
import { resizeCells } from '../kernels/resize';
import { isEmptyPatch, sizedGrid } from '../patch';
import type { Change, Numbers, Patch, Settings } from '../types';
import type { Outcome } from './outcome';

/** New values of any part of the document but its cells. */
export type SettingsChange = Partial<Settings> & { about?: WaveformAbout; intent?: WaveformIntent };

const NUMBER_KEYS = [
  'subcarrierSpacingHz',
  'prefixSamples',
  'overlapSamples',
  'oversampling',
  'frequencyOffsetHz',
  'peakReduction',
] as const;
const WHOLE_KEYS = ['tray', 'streams', 'timing', 'level', 'markers'] as const;

function differs(a: unknown, b: unknown): boolean {
  return a !== b && JSON.stringify(a) !== JSON.stringify(b);
}

/** What a smaller grid takes with it: prefixes of symbols and markers at symbols that are no more. */
function cutLists(settings: Settings, change: SettingsChange): Settings {
  const next: Settings = { ...settings, ...pickSettings(change) };
  const { symbolCount } = next;
  if (!change.prefixSamples && next.prefixSamples.length > symbolCount)
    next.prefixSamples = next.prefixSamples.slice(0, symbolCount);
  if (!change.markers && next.markers.some(({ symbol }) => symbol !== null && symbol >= symbolCount))
    next.markers = next.markers.filter(({ symbol }) => symbol === null || symbol < symbolCount);
  return next;
}

function pickSettings(change: SettingsChange): Partial<Settings> {
  const { about: _about, intent: _intent, ...settings } = change;
  return settings;
}

/** The settings' own rules, judged with a bare grid: a form asks at every key press, and the cells have their own check. */
function settingsIssue(
  document: EditorDocument,
  settings: Settings,
  change: SettingsChange,
): { pointer: string; message: string } | null {
  const { tray, streams, peakReduction, level, markers, ...numbers } = settings;
  const isSized = Number.isInteger(numbers.symbolCount) && numbers.symbolCount >= 1 && numbers.symbolCount <= 16384;
  const rowOfSymbol = new Array<number>(isSized ? numbers.symbolCount : 1).fill(0);
  const grid = { rows: [[numbers.fftSize, 0]], rowOfSymbol };
  const parsed = parseWaveformDocument({
    format: 'combwright.waveform',
    version: 1,
    about: change.about ?? document.about,
    content: { ...numbers, tray, grid, streams, peakReduction, level, markers },
    intent: change.intent ?? document.intent,
  });
  if (parsed.ok) return null;
  // A wrong size makes the bare grid wrong too: its own line comes first.
  const issue = parsed.issues.find(({ pointer }) => !pointer.startsWith('/content/grid')) ?? parsed.issues[0]!;
  return { pointer: issue.pointer, message: `${nameOf(issue.pointer)} ${issue.message}.` };
}

const FIELD_NAMES: Record<string, string> = {
  fftSize: 'FFT size',
  subcarrierSpacingHz: 'Spacing',
  symbolCount: 'Symbols',
  prefixSamples: 'Prefix',
  overlapSamples: 'Overlap',
  oversampling: 'Oversampling',
  frequencyOffsetHz: 'Offset',
  repeats: 'Repeats',
  gapSamples: 'Idle gap',
  padSamples: 'Pad',
  timing: 'The file',
  headroomDb: 'Headroom',
  powerDb: 'Power',
  bitMap: 'Bit map',
  start: 'Start',
  name: 'Name',
  title: 'Title',
  outputRmsDbm: 'RMS wanted',
  lossDb: 'Loss',
  devicePeakLimitDbm: 'Peak limit',
  deviceMeanLimitDbm: 'Mean limit',
  levelToleranceDb: 'Tolerance',
  offsetSamples: 'Marker offset',
  lengthSamples: 'Marker length',
};

function nameOf(pointer: string): string {
  const steps = pointer.split('/').reverse();
  return steps.map((step) => FIELD_NAMES[step]).find((name) => name !== undefined) ?? 'This';
}

function changesOf(document: EditorDocument, next: Settings, change: SettingsChange, cells: Uint8Array): Change[] {
  const { settings } = document;
  const changes: Change[] = [];
  const before: Partial<Numbers> = {};
  const after: Partial<Numbers> = {};
  for (const key of NUMBER_KEYS) {
    if (!differs(settings[key], next[key])) continue;
    Object.assign(before, { [key]: settings[key] });
    Object.assign(after, { [key]: next[key] });
  }
  if (Object.keys(after).length > 0) changes.push({ kind: 'numbers', before, after });
  for (const kind of WHOLE_KEYS) {
    if (differs(settings[kind], next[kind]))
      changes.push({ kind, before: settings[kind], after: next[kind] } as Change);
  }
  if (cells !== document.cells) {
    changes.push({
      kind: 'size',
      before: sizedGrid(document.cells, settings.fftSize, settings.symbolCount),
      after: sizedGrid(cells, next.fftSize, next.symbolCount),
    });
  }
  if (change.about && differs(document.about, change.about))
    changes.push({ kind: 'about', before: document.about, after: change.about });
  if (change.intent && differs(document.intent, change.intent))
    changes.push({ kind: 'intent', before: document.intent, after: change.intent });
  return changes;
}

const plural = (count: number, one: string, many: string) => `${formatInteger(count)} ${count === 1 ? one : many}`;

/** "1024 points hold 1024 subcarriers. 176 painted cells would be cut." and what else would go. */
function lossText(settings: Settings, next: Settings, cutCells: number): string | null {
  const lines: string[] = [];
  if (cutCells > 0) {
    const holds =
      next.fftSize < settings.fftSize
        ? `${formatInteger(next.fftSize)} points hold ${formatInteger(next.fftSize)} subcarriers.`
        : `${plural(next.symbolCount, 'symbol ends', 'symbols end')} at symbol ${formatInteger(next.symbolCount - 1)}.`;
    lines.push(`${holds} ${plural(cutCells, 'painted cell', 'painted cells')} would be cut.`);
  }
  const lostMarkers = settings.markers.filter(({ symbol }) => symbol !== null && symbol >= next.symbolCount);
  if (lostMarkers.length > 0 && next.markers.length < settings.markers.length)
    lines.push(`${lostMarkers.map(({ name }) => `“${name}”`).join(', ')} would go: the symbol it marks is no more.`);
  return lines.length > 0 ? lines.join(' ') : null;
}

/**
 * A change of numbers, timing, level, markers, tray, streams, title or intent as one patch. Refused (with the JSON Pointer
 * of the field) when the document would break a rule; a question when painted cells or markers would be cut.
 */
export function planSettings(document: EditorDocument, change: SettingsChange, label: string): Outcome {
  const { settings } = document;
  const next = cutLists(settings, change);
  const issue = settingsIssue(document, next, change);
  if (issue) return { kind: 'refused', ...issue };
  const isResized = next.fftSize !== settings.fftSize || next.symbolCount !== settings.symbolCount;
  const resized = isResized ? resizeCells(document.cells, settings, next) : { cells: document.cells, cutCells: 0 };
  if (isResized || next.tray !== settings.tray) {
    const message = gridRefusal({ settings: next, cells: resized.cells });
    if (message !== null) return { kind: 'refused', message };
  }
  const patch: Patch = { label, changes: changesOf(document, next, change, resized.cells) };
  if (isEmptyPatch(patch)) return null;
  const text = lossText(settings, next, resized.cutCells);
  if (text === null) return { kind: 'patch', patch };
  const kept = next.fftSize !== settings.fftSize ? settings.fftSize : settings.symbolCount;
  return { kind: 'question', question: { text, doLabel: 'Cut them', keepLabel: `Keep ${kept}`, patch } };
}
