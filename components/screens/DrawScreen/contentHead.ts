import type { Settings } from '@/lib/editor/types';
import type { WaveformContent } from '@/lib/synth';

/** The settings as a content with a bare grid: for figures that take their cells beside it. */
export function contentHead(settings: Settings): WaveformContent {
  const rowOfSymbol = new Array<number>(settings.symbolCount).fill(0);
  return { ...settings, grid: { rows: [[settings.fftSize, 0]], rowOfSymbol } };
}
