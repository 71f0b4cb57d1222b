import { formatQuantity } from '@/lib/drawing/quantities';
import type { QuantityText } from '@/lib/drawing/quantities';
import { deriveFigures } from '@/lib/synth/index';
import type { DerivedFigures, WaveformContent } from '@/lib/synth/index';
import type { EditorDocument } from '../document';
import type { Settings } from '../types';

/** One figure that a change of numbers moves: "Sample clock, 30.72 MHz → 61.44 MHz". */
export interface Consequence {
  name: string;
  now: QuantityText;
  then: QuantityText;
}

const ROWS: readonly [string, (figures: DerivedFigures) => number, string][] = [
  ['Sample clock', (f) => f.sampleClockHz, 'Hz'],
  ['Symbol', (f) => f.symbolTimeSec, 's'],
  ['Frame', (f) => f.frameTimeSec, 's'],
  ['Usable guard', (f) => f.usableGuardSec, 's'],
  ['File', (f) => f.fileSamples, 'samples'],
];

/** The figures of the numbers alone: a bare grid stands for the cells, which move none of these. */
function figuresOf(settings: Settings): DerivedFigures {
  const grid = { rows: [[settings.fftSize, 0]], rowOfSymbol: new Array<number>(settings.symbolCount).fill(0) };
  const content: WaveformContent = { ...settings, grid };
  return deriveFigures(content);
}

/** What follows from legal new numbers, at most four rows, the changed figures alone. */
export function whatFollows(document: EditorDocument, change: Partial<Settings>): Consequence[] {
  const now = figuresOf(document.settings);
  const then = figuresOf({ ...document.settings, ...change });
  return ROWS.filter(([, value]) => value(now) !== value(then))
    .slice(0, 4)
    .map(([name, value, unit]) => ({
      name,
      now: formatQuantity(value(now), unit),
      then: formatQuantity(value(then), unit),
    }));
}
