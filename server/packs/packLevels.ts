import { levelsInDbfs, type MeasuredLevels, type WordScale } from '@/lib/synth';
import type { RenderingMeasure } from './measureRendering.ts';
import type { VectorProof } from './vectorProof.ts';

/** Levels in dB to full scale: what fit, manifest and level card are computed from. */
export function packLevels(measure: RenderingMeasure, scale: WordScale, proof: VectorProof): MeasuredLevels {
  const { stats, levels } = measure;
  return levelsInDbfs({
    fileMeanPower: stats.rms * stats.rms,
    activeMeanPower: stats.activeRms * stats.activeRms,
    renderedPeakPower: levels.interpolatedPeak * levels.interpolatedPeak,
    // The proof took it over full scale; here it is wanted in steps.
    reconstructedPower: proof.reconstructedPeak.power * scale.fullScale * scale.fullScale,
    saturatedComponents: proof.saturated.components,
    scale: scale.scale,
    fullScale: scale.fullScale,
  });
}
