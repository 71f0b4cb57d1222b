/** A capture's clock as p/q of the vector's. */
export interface ClockRatio {
  p: number;
  q: number;
  /** Clock given over p/q · vector's, less 1, in ppm. */
  errorPpm: number;
}

export const RATIO_MOST = 64;
export const CLOCK_ERROR_MOST_PPM = 20;

/** The fraction p/q (both 1…64) nearest to clockHz/vectorClockHz, the smallest of those within 20 ppm. */
export function nearestClockRatio(clockHz: number, vectorClockHz: number): ClockRatio {
  const wanted = clockHz / vectorClockHz;
  let best: ClockRatio = { p: 1, q: 1, errorPpm: (wanted - 1) * 1e6 };
  for (let sum = 2; sum <= 2 * RATIO_MOST; sum++)
    for (let p = Math.max(1, sum - RATIO_MOST); p <= Math.min(RATIO_MOST, sum - 1); p++) {
      const errorPpm = ((wanted * (sum - p)) / p - 1) * 1e6;
      if (Math.abs(errorPpm) < Math.abs(best.errorPpm)) best = { p, q: sum - p, errorPpm };
      if (Math.abs(best.errorPpm) <= CLOCK_ERROR_MOST_PPM) return best;
    }
  return best;
}
