import { demand } from '../errors';
import { sineCosineOfFraction } from '../math/turns';
import type { WindowKind, WindowTable } from './types';

/** w[i] = Σ (−1)^m a_m cos(2πmi/n). Source: Harris, "On the use of windows", Proc. IEEE 66, 1978; flat top and Nuttall after Heinzel et al., 2002. */
const COEFFICIENTS: Record<WindowKind, number[]> = {
  rectangular: [1],
  hann: [0.5, 0.5],
  hamming: [0.54, 0.46],
  blackman: [0.42, 0.5, 0.08],
  blackmanHarris: [0.35875, 0.48829, 0.14128, 0.01168],
  nuttall: [0.3635819, 0.4891775, 0.1365995, 0.0106411],
  flatTop: [0.21557895, 0.41663158, 0.277263158, 0.083578947, 0.006947368],
};

/** A window of 1…2^22 points in its periodic form, with its equivalent noise bandwidth. Throws SynthError `bad_size` otherwise. */
export function createWindow(kind: WindowKind, length: number): WindowTable {
  demand(Number.isInteger(length) && length >= 1 && length <= 4194304, 'bad_size', 'A window has 1 to 2^22 points.');
  const coefficients = COEFFICIENTS[kind];
  const weights = new Float64Array(length);
  for (let i = 0; i < length; i++) {
    let weight = 0;
    for (let m = 0; m < coefficients.length; m++) {
      const term = m === 0 ? 1 : sineCosineOfFraction(m * i, length).cosine;
      weight += (m % 2 === 0 ? 1 : -1) * coefficients[m]! * term;
    }
    weights[i] = weight;
  }
  let sum = 0;
  let squares = 0;
  for (const weight of weights) {
    sum += weight;
    squares += weight * weight;
  }
  return { kind, weights, enbwBins: (length * squares) / (sum * sum), coherentGain: sum / length };
}
