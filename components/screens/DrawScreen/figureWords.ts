import { formatInteger, formatNumber, formatQuantity, type QuantityText } from '@/lib/drawing/quantities';
import type { FigureId, LiveFigure, LiveResult } from '@/lib/editor/live/protocol';

/** The title block's cells, four a row. */
export const BLOCK_FIGURES: readonly FigureId[] = [
  'paprFrame',
  'paprSymbol',
  'rms',
  'occupiedBand',
  'loadedBand',
  'paintedSpan',
  'sampleClock',
  'frameTime',
  'bitsPerFrame',
  'bitRate',
  'prefixOverhead',
  'pilotOverhead',
  'usableGuard',
  'delayReach',
  'dopplerReach',
  'efficiency',
];

export const BLOCK_ROWS = Math.ceil(BLOCK_FIGURES.length / 4);

const SHORT_NAMES: Partial<Record<FigureId, string>> = { paprSymbol: 'PAPR, symbol' };

/** A short name for a narrow cell. */
export function shortName(figure: LiveFigure): string {
  const symbol = /(\d+)$/.exec(figure.name)?.[1];
  return figure.id === 'paprSymbol' && symbol ? `Symbol ${symbol}` : (SHORT_NAMES[figure.id] ?? figure.name);
}

/** Value and unit as they are read. A figure that does not exist (nothing painted) reads "none". */
export function figureText(figure: LiveFigure): QuantityText {
  const { value, unit, id } = figure;
  if (value === null) return { value: 'none', unit: '' };
  if (unit === 'dB') return { value: formatNumber(value, 2, true), unit };
  if (unit === '%') return { value: formatNumber(value, 1, true), unit };
  if (id === 'bitsPerFrame') return { value: formatInteger(value), unit: '' };
  if (unit === '') return { value: formatNumber(value, 3, true), unit: '' };
  if (unit === 'bit/s/Hz') return { value: formatNumber(value, 2, true), unit };
  return formatQuantity(value, unit, 4);
}

const tabbed = (rows: readonly (readonly (string | number)[])[]) => rows.map((row) => row.join('\t')).join('\n');

/** All figures as lines of name, value and unit. */
export function copyFigures(figures: readonly LiveFigure[]): string {
  return tabbed(
    figures.map((figure) => {
      const { value, unit } = figureText(figure);
      return [figure.name, value, unit, figure.note ?? ''];
    }),
  );
}

/** A view's figures as text with units, a head line first. */
export function copyView(view: 'time' | 'spectrum' | 'constellation' | 'ccdf', result: LiveResult): string {
  const at = (trace: { from: number; to: number }, columns: number, c: number) =>
    trace.from + ((c + 0.5) / columns) * (trace.to - trace.from);
  switch (view) {
    case 'time': {
      const { time } = result;
      if (!time) return '';
      const columns = time.envelope.max.length;
      const rows = Array.from(time.envelope.max, (most, c) => [
        at(time, columns, c).toFixed(2),
        time.envelope.min[c]!.toFixed(5),
        most.toFixed(5),
      ]);
      return tabbed([['sample', `least |x| over RMS, symbol ${time.symbol}`, 'most |x| over RMS'], ...rows]);
    }
    case 'spectrum': {
      const { spectrum } = result;
      if (!spectrum) return '';
      const columns = spectrum.db.max.length;
      const rows = Array.from(spectrum.db.max, (most, c) => [
        at(spectrum, columns, c).toFixed(2),
        spectrum.db.min[c]!.toFixed(2),
        most.toFixed(2),
      ]);
      return tabbed([
        ['position', 'least, dB', `most, dB; RBW ${spectrum.rbwHz.toFixed(1)} Hz; ${spectrum.recipe}`],
        ...rows,
      ]);
    }
    case 'ccdf': {
      const { ccdf } = result;
      if (!ccdf) return '';
      const rows = Array.from(ccdf.thresholdsDb, (db, i) => [
        db.toFixed(2),
        ccdf.probability[i]!.toExponential(4),
        ccdf.gaussian[i]!.toExponential(4),
      ]);
      return tabbed([['over mean, dB', 'probability', 'Gaussian'], ...rows]);
    }
    case 'constellation': {
      const { constellation } = result;
      if (!constellation) return '';
      const rows: string[][] = [['I', 'Q']];
      for (let i = 0; i < constellation.points.length; i += 2)
        rows.push([constellation.points[i]!.toFixed(6), constellation.points[i + 1]!.toFixed(6)]);
      return tabbed(rows);
    }
  }
}
