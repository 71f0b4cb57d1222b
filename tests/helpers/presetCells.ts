import { presets } from '@/lib/document/presets/presets';
import { createCellValues, type CellValues, type WaveformContent } from '@/lib/synth/index';

export interface PresetCell {
  subcarrier: number;
  re: number;
  im: number;
}

/** A preset's content with what its cells hold, as the renderer sees them. */
export interface PresetCells {
  content: WaveformContent;
  /** The cells of one symbol whose ink's name begins so (or all that are not null), subcarriers upwards. */
  cellsOf(symbol: number, name?: string): PresetCell[];
  subcarriersOf(symbol: number, name?: string): number[];
}

export function contentOf(presetId: string): WaveformContent {
  const preset = presets.find((one) => one.presetId === presetId);
  if (!preset) throw new Error(`no preset ${presetId}`);
  return preset.build().content;
}

export function presetCells(content: WaveformContent): PresetCells {
  const values: CellValues = createCellValues(content);
  const { fftSize, tray } = content;
  const out = new Float64Array(2 * fftSize);
  const cellsOf = (symbol: number, name = '') => {
    values.write(0, symbol, out);
    const found: PresetCell[] = [];
    for (let position = 0; position < fftSize; position += 1) {
      const ink = tray[values.cells[symbol * fftSize + position]!]!;
      if (ink.role === 'null' || !ink.name.startsWith(name)) continue;
      found.push({
        subcarrier: position - Math.floor(fftSize / 2),
        re: out[2 * position]!,
        im: out[2 * position + 1]!,
      });
    }
    return found;
  };
  return { content, cellsOf, subcarriersOf: (symbol, name) => cellsOf(symbol, name).map((cell) => cell.subcarrier) };
}

/** Samples of one frame at the base rate: prefixes, used cyclically, and useful parts. */
export function frameSamples({ fftSize, symbolCount, prefixSamples }: WaveformContent): number {
  let samples = symbolCount * fftSize;
  for (let symbol = 0; symbol < symbolCount; symbol += 1) samples += prefixSamples[symbol % prefixSamples.length]!;
  return samples;
}

export const powerOf = (cells: readonly PresetCell[]): number =>
  cells.reduce((sum, { re, im }) => sum + re * re + im * im, 0) / cells.length;
