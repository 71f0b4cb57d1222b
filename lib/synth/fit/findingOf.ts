import type { Finding, FitFinding } from './types';

/** A finding about a length or its like: a `distance` above zero misses. */
export function byDistance(
  of: Pick<FitFinding, 'check' | 'title' | 'hard' | 'unit' | 'found' | 'words'> & {
    measured: number;
    limit: number;
    distance: number;
    byHowMuch: string;
  },
): Finding {
  const misses = of.distance > 0;
  return { ...of, verdict: misses ? 'misses' : 'meets', byHowMuch: misses ? of.byHowMuch : '' };
}
