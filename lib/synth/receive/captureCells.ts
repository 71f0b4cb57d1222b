import { createTransform } from '../fft/transform';
import { writeUnitOfTurns } from '../math/turns';
import { nextFiveSmooth } from '../measure/anyTransform';
import type { SampleSource } from '../measure/reconstructedPeak';
import type { Cycle } from './cycle';
import { createResampler } from './resample';
import { mixedSource } from './sources';

/** How a capture lies to the known waveform. */
export interface CaptureFit {
  /** Place of a cycle's first sample in the capture, capture samples, fractional, may be negative. */
  originSamples: number;
  /** Capture samples per sample of the file (the document's M), clock error included. */
  ratio: number;
  /** Cycles per capture sample of the carrier offset, the document's own frequency offset included. */
  mixTurns: number;
  /** True when both clocks are taken as one (ratio 1): windows are whole capture samples and nothing is interpolated. */
  isLocked: boolean;
}

/** Cells of a capture at any symbol. */
export interface CellReader {
  /**
   * Writes the 2·N values (position p = k + ⌊N/2⌋) of the symbol whose useful part begins `usefulStart` file samples after the origin, as if
   * the window began there: an earlier window's phase ramp is taken out. In the capture's unit over √N, as the synthesis's transform.
   */
  read(usefulStart: number, out: Float64Array): void;
  /** First and last capture sample (end excluded) that the symbol's window needs. */
  reach(usefulStart: number): { first: number; end: number };
}

/** Subcarriers that the capture's band holds, |k| ≤ this; the filter's transition is left out. */
export function capturedSubcarriers(cycle: Cycle, ratio: number): number {
  const perSubcarrier = 1 / (cycle.layout.usefulSamples * ratio); // cycles per capture sample
  return Math.floor(0.49 / perSubcarrier);
}

const TRANSFORM_MOST = 4194304;

/** The least 5-smooth multiple of N·Δf that the capture's clock (`ratio` of N·Δf) does not exceed, as far as a transform can be that long. */
function transformMultiple(fftSize: number, ratio: number): number {
  let multiple = nextFiveSmooth(Math.ceil(ratio - 1e-3));
  while (fftSize * multiple > TRANSFORM_MOST) multiple = nextFiveSmooth(Math.ceil(multiple / 2));
  return multiple;
}

/**
 * Reads cells of `source` through `fit`; the window begins `advanceSamples` file samples before the useful part. The transform runs at the
 * lowest whole multiple of N·Δf that the capture's own clock does not exceed, so that nothing folds. a(k) = (1/(M·√N)) Σ x[n] e^{−j2πkn/(N·M)}.
 */
export function createCellReader(
  source: SampleSource,
  cycle: Cycle,
  fit: CaptureFit,
  advanceSamples: number,
): CellReader {
  const { fftSize, oversampling } = cycle.content;
  const { usefulSamples } = cycle.layout;
  const multiple = fit.isLocked ? oversampling : transformMultiple(fftSize, fit.ratio * oversampling);
  const size = fftSize * multiple;
  const step = (fit.ratio * oversampling) / multiple;
  const transform = createTransform(size);
  const window = new Float64Array(2 * size);
  const bins = new Float64Array(2 * size);
  const ramp = new Float64Array(2 * fftSize);
  const half = Math.floor(fftSize / 2);
  const scale = 1 / (multiple * Math.sqrt(fftSize));
  const mixed = mixedSource(source, fit.mixTurns);
  const edge = Math.max(Math.abs(cycle.usedLow), Math.abs(cycle.usedHigh));
  const pass = Math.min(0.49, (edge + 0.5) / (usefulSamples * fit.ratio));
  const stop = Math.min(1 - pass, 1 / step - pass);
  const resampler = fit.isLocked ? null : createResampler(mixed, { passTurns: pass, stopTurns: stop });
  const margin = resampler ? resampler.taps / 2 + 1 : 0;
  let rampFor = NaN;

  /** The window's first place in the capture. */
  function startOf(usefulStart: number): number {
    const wanted = fit.originSamples + (usefulStart - advanceSamples) * fit.ratio;
    return resampler ? wanted : Math.round(wanted);
  }

  /** ramp[p] = e^{j2πk·shift/(N·M)}: the phase that a window `shift` file samples early takes. */
  function rampOf(shift: number): Float64Array {
    if (shift === rampFor) return ramp;
    rampFor = shift;
    for (let p = 0; p < fftSize; p++) writeUnitOfTurns(((p - half) * shift) / usefulSamples, 0, ramp, 2 * p);
    return ramp;
  }

  return {
    reach(usefulStart) {
      const first = startOf(usefulStart);
      return { first: Math.floor(first) - margin, end: Math.ceil(first + (size - 1) * step) + 1 + margin };
    },
    read(usefulStart, out) {
      const start = startOf(usefulStart);
      if (resampler) resampler.read(start, step, size, window);
      else mixed.read(start, size, window);
      transform.forward(window, bins);
      const late = (start - fit.originSamples) / fit.ratio - (usefulStart - advanceSamples);
      // places of a locked capture differ by rounding only: one ramp for all
      const turned = rampOf(Math.round((advanceSamples - late) * 1e6) / 1e6);
      for (let p = 0; p < fftSize; p++) {
        const k = p - half;
        const bin = 2 * (k < 0 ? k + size : k);
        const re = bins[bin]! * scale;
        const im = bins[bin + 1]! * scale;
        const uRe = turned[2 * p]!;
        const uIm = turned[2 * p + 1]!;
        out[2 * p] = re * uRe - im * uIm;
        out[2 * p + 1] = re * uIm + im * uRe;
      }
    },
  };
}
