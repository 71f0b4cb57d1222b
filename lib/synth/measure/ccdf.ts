import { exponential, logarithm, powerOfDecibels } from '../math/exponential';
import { powerAbove, powerOfBin, binOfPower, POWER_BINS } from './histogram';
import type { CcdfCurve, PowerHistogram } from './types';

/** The thresholds −10…20 dB every 0.1 dB that plots and manifests use: a new array, rising. */
export function ccdfThresholds(lowDb = -10, highDb = 20, stepDb = 0.1): Float64Array {
  const count = Math.round((highDb - lowDb) / stepDb) + 1;
  return Float64Array.from({ length: count }, (_, i) => lowDb + i * stepDb);
}

/**
 * CCDF of instantaneous power over mean power: the part of the samples above mean · 10^(threshold/10). Exact at the bins' edges, between
 * them (0.13 dB) interpolated along the exponential, or along the line where the next edge counts nothing. All 0 when the mean is 0.
 * Never to be mixed with the CCDF of the symbols' PAPR. `thresholdsDb` is kept in the curve, not copied.
 */
export function sampleCcdf(histogram: PowerHistogram, meanPower: number, thresholdsDb: Float64Array): CcdfCurve {
  const above = new Float64Array(POWER_BINS + 1); // samples at or above the bin's least power
  for (let bin = POWER_BINS - 1; bin >= 0; bin--) above[bin] = above[bin + 1]! + histogram.counts[bin]!;
  const probability = new Float64Array(thresholdsDb.length);
  if (meanPower > 0 && histogram.total > 0) {
    thresholdsDb.forEach((db, i) => {
      const power = powerAbove(meanPower, db);
      const bin = binOfPower(power);
      const edge = powerOfBin(bin);
      const next = powerOfBin(bin + 1);
      const part = Math.min(1, Math.max(0, (power - edge) / (next - edge)));
      const high = above[bin]! / histogram.total;
      const low = above[bin + 1]! / histogram.total;
      probability[i] = low > 0 ? exponential((1 - part) * logarithm(high) + part * logarithm(low)) : high * (1 - part);
    });
  }
  return { thresholdsDb, probability };
}

/** CCDF of the PAPR per symbol: the part of the symbols (silent ones, NaN, left out) whose PAPR exceeds each threshold. Exact; the input is not changed. */
export function symbolCcdf(symbolPaprDb: Float64Array, thresholdsDb: Float64Array): CcdfCurve {
  const sorted = symbolPaprDb.filter((value) => !Number.isNaN(value)).sort();
  const probability = new Float64Array(thresholdsDb.length);
  thresholdsDb.forEach((db, i) => {
    let low = 0;
    let high = sorted.length;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (sorted[middle]! > db) high = middle;
      else low = middle + 1;
    }
    probability[i] = sorted.length === 0 ? 0 : (sorted.length - low) / sorted.length;
  });
  return { thresholdsDb, probability };
}

/** The reference of the samples' CCDF: a complex Gaussian's power exceeds g times its mean with probability e^−g (Rayleigh envelope, textbook). */
export function gaussianCcdf(thresholdsDb: Float64Array): CcdfCurve {
  return { thresholdsDb, probability: thresholdsDb.map((db) => exponential(-powerOfDecibels(db))) };
}

/**
 * The reference of the symbols' CCDF: 1 − (1 − e^−g)^(αN), α = 1 at the Nyquist rate, 2.8 for an interpolated waveform of N ≥ 64 loaded
 * subcarriers. Source: van Nee, de Wild, "Reducing the peak-to-average power ratio of OFDM", VTC 1998.
 */
export function gaussianSymbolCcdf(subcarriers: number, thresholdsDb: Float64Array, alpha = 2.8): CcdfCurve {
  const probability = thresholdsDb.map((db) => {
    const tail = exponential(-powerOfDecibels(db));
    // ln(1 − tail) loses everything for small tails: its series there
    const log = tail < 1e-4 ? -tail * (1 + tail / 2 + (tail * tail) / 3) : logarithm(1 - tail);
    const exponent = alpha * subcarriers * log;
    return exponent > -1e-5 ? -exponent * (1 + exponent / 2 + (exponent * exponent) / 6) : 1 - exponential(exponent);
  });
  return { thresholdsDb, probability };
}

/** The threshold in dB where a falling curve crosses `probability` (0…1), along the logarithm; null where it does not reach it. */
export function dbAtProbability(curve: CcdfCurve, probability: number): number | null {
  const { thresholdsDb, probability: values } = curve;
  for (let i = 1; i < values.length; i++) {
    const before = values[i - 1]!;
    const after = values[i]!;
    if (before < probability || after >= probability) continue;
    const span = thresholdsDb[i]! - thresholdsDb[i - 1]!;
    const part =
      after > 0
        ? (logarithm(before) - logarithm(probability)) / (logarithm(before) - logarithm(after))
        : (before - probability) / (before - after);
    return thresholdsDb[i - 1]! + span * part;
  }
  return null;
}
