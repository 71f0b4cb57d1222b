import { amplitudeOfDecibels } from '../math/exponential';
import type { BenchContent, Level } from '../types';
import type { ReferenceLevels, WordScale } from './types';

/** Full scale F of a profile's words: 2^(bits−1) − 1, for floats 1. */
export function fullScaleOf(bench: Pick<BenchContent, 'word' | 'bits'>): number {
  return bench.word === 'float32' ? 1 : (1 << (bench.bits - 1)) - 1;
}

/**
 * The scale that puts the level's reference at F·10^(−headroom/20). A silent file (reference level 0) has none: scale 0 and
 * `isSilent`, a value and not an error.
 */
export function wordScale(
  level: Level,
  levels: ReferenceLevels,
  bench: Pick<BenchContent, 'word' | 'bits'>,
): WordScale {
  const fullScale = fullScaleOf(bench);
  const referenceLevel = levels[level.reference];
  const isSilent = referenceLevel === 0;
  const scale = isSilent ? 0 : (fullScale * amplitudeOfDecibels(-level.headroomDb)) / referenceLevel;
  return { scale, fullScale, referenceLevel, isSilent };
}
