import { createMixedRadix } from '../fft/mixedRadix';

/**
 * A symbol's cells and its interpolated samples, for what goes to and fro between them. Cells stand at position p = k + ⌊N/2⌋,
 * interleaved, in units of x (a/√N); samples are x[0…U−1], U = M′·N, interleaved.
 */
export interface WorkSpace {
  readonly fftSize: number;
  /** U. */
  readonly samples: number;
  /** x[n] = Σ_k cells[k] e^{+j2πkn/U}. `out` has 2·U numbers and may not be the cells. */
  toSamples(cells: Float64Array, out: Float64Array): void;
  /** cells[k] = (1/U) Σ_n x[n] e^{−j2πkn/U}, of the N subcarriers of the grid; what lies beyond them is left out. */
  toCells(samples: Float64Array, out: Float64Array): void;
}

/** Owns its tables and scratch space; not for two callers at once. Throws SynthError `bad_size` as the transform does. */
export function createWorkSpace(fftSize: number, interpolation: number): WorkSpace {
  const size = fftSize * interpolation;
  const half = Math.floor(fftSize / 2);
  const inverse = createMixedRadix(size, 'inverse');
  const forward = createMixedRadix(size, 'forward');
  const bins = new Float64Array(2 * size);
  const scale = 1 / size;
  return {
    fftSize,
    samples: size,
    toSamples(cells, out) {
      bins.fill(0);
      bins.set(cells.subarray(0, 2 * half), 2 * (size - half));
      bins.set(cells.subarray(2 * half, 2 * fftSize), 0);
      inverse(bins, out);
    },
    toCells(samples, out) {
      forward(samples, bins);
      for (let p = 0; p < fftSize; p++) {
        const bin = 2 * (p < half ? size - half + p : p - half);
        out[2 * p] = bins[bin]! * scale;
        out[2 * p + 1] = bins[bin + 1]! * scale;
      }
    },
  };
}

/** The largest |x|² of interleaved samples; 0 for none. */
export function peakPowerOf(samples: Float64Array): number {
  let peak = 0;
  for (let i = 0; i < samples.length; i += 2) {
    const power = samples[i]! * samples[i]! + samples[i + 1]! * samples[i + 1]!;
    if (power > peak) peak = power;
  }
  return peak;
}
