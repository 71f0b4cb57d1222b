import {
  checkFit,
  levelsInDbfs,
  wordScale,
  type BenchProfile,
  type FitFinding,
  type MeasuredLevels,
  type WaveformContent,
  type WaveformDocument,
} from '@/lib/synth';
import type { RenderedLevels } from '../figures/measure.ts';

/** A rendering's levels, or why there are none. */
export type KnownLevels = RenderedLevels | 'measuring' | null;

/** A rendering's levels as this bench's words would carry them. What saturates is not counted here: 0 where nothing can. */
function levelsOn(bench: BenchProfile, content: WaveformContent, levels: RenderedLevels): MeasuredLevels {
  const { scale, fullScale } = wordScale(content.level, levels, bench.content);
  return levelsInDbfs({
    fileMeanPower: levels.rms ** 2,
    activeMeanPower: levels.activeRms ** 2,
    renderedPeakPower: levels.interpolatedPeak ** 2,
    reconstructedPower: (levels.reconstructedPeak * scale) ** 2,
    saturatedComponents: levels.componentPeak * scale <= fullScale ? 0 : null,
    scale,
    fullScale,
  });
}

/** The fit of a document on a bench, with what its rendering measured. */
export function fitOf(document: WaveformDocument, bench: BenchProfile, levels: KnownLevels): FitFinding[] {
  if (levels === 'measuring')
    return checkFit(document, bench, null, { unmeasuredBecause: 'The waveform is being measured.' });
  if (levels === null)
    return checkFit(document, bench, null, {
      unmeasuredBecause: 'The file is too long to be measured here; its pack measures it.',
    });
  if (!(levels.rms > 0))
    return checkFit(document, bench, null, { unmeasuredBecause: 'Nothing is painted: every sample is zero.' });
  return checkFit(document, bench, levelsOn(bench, document.content, levels), {
    wave: { seam: levels.seam ?? null, symbolPeaks: levels.symbolPeaks ?? null },
  });
}
