import type { Counter, Ink, WaveformContent } from '@/lib/synth/index';

/**
 * Where an ink may stand so that no index counter + start is negative: subcarriers from position k + ⌊N/2⌋ = leastPosition
 * upwards, symbols from leastSymbol on. A factor that counts cells from below zero leaves no place at all: both Infinity.
 */
export interface PaintLimits {
  leastPosition: number;
  leastSymbol: number;
}

export function paintLimits(ink: Ink): PaintLimits {
  const limits: PaintLimits = { leastPosition: 0, leastSymbol: 0 };
  if (ink.role !== 'pilot' && ink.role !== 'tone') return limits;
  for (const { counter, start } of ink.value.factors) {
    if (start >= 0) continue;
    if (counter === 'subcarrier') limits.leastPosition = Math.max(limits.leastPosition, -start);
    else if (counter === 'symbol') limits.leastSymbol = Math.max(limits.leastSymbol, -start);
    else return { leastPosition: Infinity, leastSymbol: Infinity };
  }
  return limits;
}

/** With the minus sign that figures have in sentences. */
const signed = (value: number): string => String(value).replace('-', '−');

const counterWords: Record<Counter, string> = {
  cell: 'cells',
  symbolCell: 'cells of the symbol',
  subcarrier: 'subcarriers',
  symbol: 'symbols',
};

/** The refusal of an ink that is painted before the first place that its counters can hold, for issues and for strokes. */
export function countedTooLow(ink: Ink, factorAt: number, fftSize: number, symbolCount: number): string {
  if (ink.role !== 'pilot' && ink.role !== 'tone') return '';
  const { counter, start } = ink.value.factors[factorAt]!;
  const what = `Ink ${ink.inkId} “${ink.name}” counts ${counterWords[counter]} from ${signed(start)}, below its sequence's first value`;
  if (counter === 'subcarrier' && -start < fftSize) {
    return `${what}: the first place it can hold is subcarrier ${signed(-start - Math.floor(fftSize / 2))}`;
  }
  if (counter === 'symbol' && -start < symbolCount) return `${what}: the first place it can hold is symbol ${-start}`;
  return `${what}: it can hold no place of this grid until it starts at 0 or more`;
}

interface Painted {
  leastPosition: number;
  leastSymbol: number;
}

/** The lowest position and the first symbol that each ink is painted at; undefined for one that is nowhere. */
function paintedPlaces(content: WaveformContent): (Painted | undefined)[] {
  const places: (Painted | undefined)[] = content.tray.map(() => undefined);
  const visited = new Uint8Array(content.grid.rows.length);
  content.grid.rowOfSymbol.forEach((rowAt, symbol) => {
    if (visited[rowAt] === 1) return;
    visited[rowAt] = 1;
    const row = content.grid.rows[rowAt]!;
    let position = 0;
    for (let at = 0; at < row.length; at += 2) {
      const ink = row[at + 1]!;
      const place = places[ink];
      if (place === undefined) places[ink] = { leastPosition: position, leastSymbol: symbol };
      else if (position < place.leastPosition) place.leastPosition = position;
      position += row[at]!;
    }
  });
  return places;
}

/** An index below zero is refused, of painted cells alone. Needs a grid in its one spelling. */
export function counterProblems(content: WaveformContent, add: (path: PropertyKey[], message: string) => void): void {
  let places: (Painted | undefined)[] | null = null;
  content.tray.forEach((ink, inkAt) => {
    if (ink.role !== 'pilot' && ink.role !== 'tone') return;
    ink.value.factors.forEach(({ counter, start }, factorAt) => {
      if (start >= 0) return;
      places ??= paintedPlaces(content);
      const place = places[inkAt];
      if (place === undefined) return;
      const least = counter === 'subcarrier' ? place.leastPosition : counter === 'symbol' ? place.leastSymbol : 0;
      if (least + start >= 0) return;
      const path = ['tray', inkAt, 'value', 'factors', factorAt, 'start'];
      add(path, countedTooLow(ink, factorAt, content.fftSize, content.symbolCount));
    });
  });
}
