import { createCellCensus } from '../numerology';
import type { RunGrid, WaveformContent } from '../types';
import { toneBorders, type ToneBorders } from './closing';
import { periodOf } from './period';

/**
 * What a fit reads out of a grid and its streams again and again while it tries remedies: read once for each object (remedies share
 * what they do not change), so that a grid of 2^23 cells is walked once.
 */
export interface FitFacts {
  cellsOfInk(content: WaveformContent): Float64Array;
  toneBorders(content: WaveformContent): ToneBorders;
  periodOf(source: WaveformContent['streams'][number]['source']): number | null;
}

export function createFacts(): FitFacts {
  const cells = new WeakMap<RunGrid, Float64Array>();
  const borders: { keys: readonly unknown[]; value: ToneBorders }[] = [];
  const periods = new WeakMap<object, { value: number | null }>();
  return {
    cellsOfInk(content) {
      let known = cells.get(content.grid);
      if (!known) cells.set(content.grid, (known = createCellCensus(content).cellsOfInk));
      return known;
    },
    toneBorders(content) {
      const keys = [content.grid, content.tray, content.prefixSamples];
      let known = borders.find((one) => one.keys.every((key, i) => key === keys[i]));
      if (!known) borders.push((known = { keys, value: toneBorders(content) }));
      return known.value;
    },
    periodOf(source) {
      let known = periods.get(source);
      if (!known) periods.set(source, (known = { value: periodOf(source) }));
      return known.value;
    },
  };
}
