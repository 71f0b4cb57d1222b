import type { MeasuredLevels } from '../fit/types';
import { log10 } from '../math/exponential';

/**
 * Levels in dBFS from powers in units of x and the word scale: 10 lg(power · scale² / F²), F the full scale (2^(b−1)−1, floats 1).
 * `reconstructedPower` is of the words themselves. A power of 0 has no level: null.
 */
export function levelsInDbfs(of: {
  fileMeanPower: number;
  activeMeanPower: number;
  renderedPeakPower: number;
  /** Largest |word|² of the interpolated file, in LSB²; null when it was not taken. */
  reconstructedPower: number | null;
  saturatedComponents: number | null;
  scale: number;
  fullScale: number;
}): MeasuredLevels {
  const level = (power: number | null, scale: number): number | null =>
    power === null || !(power > 0) ? null : 10 * log10(((power * scale) / of.fullScale) * (scale / of.fullScale));
  return {
    fileRmsDbfs: level(of.fileMeanPower, of.scale),
    activeRmsDbfs: level(of.activeMeanPower, of.scale),
    renderedPeakDbfs: level(of.renderedPeakPower, of.scale),
    reconstructedPeakDbfs: level(of.reconstructedPower, 1),
    saturatedComponents: of.saturatedComponents,
  };
}

/** The larger of rendered and reconstructed peak: what fit, headroom and level card take. Null when neither is known. */
export function countedPeakDbfs(levels: MeasuredLevels): number | null {
  const { renderedPeakDbfs, reconstructedPeakDbfs } = levels;
  if (renderedPeakDbfs === null) return reconstructedPeakDbfs;
  if (reconstructedPeakDbfs === null) return renderedPeakDbfs;
  return Math.max(renderedPeakDbfs, reconstructedPeakDbfs);
}
