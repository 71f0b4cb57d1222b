import { demand } from '../errors';
import { sineCosine } from '../math/turns';
import type { SampleSource } from '../measure/reconstructedPeak';

/** Samples of a source at any places. */
export interface Resampler {
  /** Taps of the filter; a place needs taps/2 samples of the source on either side of it. */
  readonly taps: number;
  /**
   * Writes the values at the places first + i·step, i = 0…count−1 (in samples of the source, step > 0), interleaved, into out[0…2·count−1].
   * What lies outside the source is 0.
   */
  read(first: number, step: number, count: number, out: Float64Array): void;
}

export interface ResampleBand {
  /** Up to here (in cycles per sample of the source, below stopTurns) the response is flat. */
  passTurns: number;
  /** From here on it is stopped; 1 − passTurns for interpolation alone. */
  stopTurns: number;
  /** Most taps, even; a narrow transition gets less than 90 dB instead of more of them. 256 by default. */
  mostTaps?: number;
}

const LEAST_TAPS = 8;
const STOP_DB = 90;
/** Places of the kernel's table between two samples; between them it is linear, below −100 dB. */
const PHASES = 512;
const CHUNK_SAMPLES = 8192;

/** Modified Bessel function I0 by its power series; x 0…50. */
function besselI0(x: number): number {
  let term = 1;
  let sum = 1;
  for (let i = 1; i < 200 && term > sum * 1e-17; i++) {
    term *= (x / (2 * i)) * (x / (2 * i));
    sum += term;
  }
  return sum;
}

/**
 * A windowed-sinc interpolator with Kaiser's window: taps = (A − 7.95)/(14.36·transition), β = 0.1102(A − 8.7). Unity gain in the pass band.
 * Source: Kaiser, "Nonrecursive digital filter design using the I0-sinh window function", ISCAS 1974 (formulas from memory).
 * Throws SynthError `bad_size` for a band without a transition.
 */
export function createResampler(source: SampleSource, band: ResampleBand): Resampler {
  const transition = band.stopTurns - band.passTurns;
  demand(transition > 0 && band.passTurns >= 0, 'bad_size', 'A filter needs a transition.');
  const most = band.mostTaps ?? 256;
  const wanted = 2 * Math.ceil((STOP_DB - 7.95) / (14.36 * transition) / 2);
  const taps = Math.min(most, Math.max(LEAST_TAPS, wanted));
  const reachedDb = Math.min(STOP_DB, 14.36 * transition * taps + 7.95);
  const beta = reachedDb > 50 ? 0.1102 * (reachedDb - 8.7) : Math.max(0, 0.22 * (reachedDb - 15));
  const cutoff = (band.passTurns + band.stopTurns) / 2;
  const half = taps / 2;
  const phases = Math.max(32, Math.floor((PHASES * 16) / Math.max(16, taps)) * 2);
  // table[phase][i]: weight of the source's sample floor(place) − half + 1 + i for a place phase/phases after floor(place)
  const table = new Float64Array((phases + 1) * taps);
  const scale = 1 / besselI0(beta);
  for (let phase = 0; phase <= phases; phase++) {
    let sum = 0;
    for (let i = 0; i < taps; i++) {
      const t = i - half + 1 - phase / phases;
      const u = t / half;
      const inside = 1 - u * u;
      if (inside <= 0) continue;
      const angle = 2 * cutoff * t;
      const sinc = t === 0 ? 1 : sineCosine(angle / 2).sine / (3.141592653589793 * angle);
      const weight = 2 * cutoff * sinc * besselI0(beta * Math.sqrt(inside)) * scale;
      table[phase * taps + i] = weight;
      sum += weight;
    }
    for (let i = 0; i < taps; i++) table[phase * taps + i] = table[phase * taps + i]! / sum;
  }
  let buffer = new Float64Array(0);

  /** Source samples from…from+count−1 into the buffer, zeros outside. */
  function load(from: number, count: number): void {
    if (buffer.length < 2 * count) buffer = new Float64Array(2 * count);
    const first = Math.max(0, from);
    const end = Math.min(source.samples, from + count);
    if (end <= first) {
      buffer.fill(0, 0, 2 * count);
      return;
    }
    buffer.fill(0, 0, 2 * (first - from));
    source.read(first, end - first, buffer.subarray(2 * (first - from)));
    buffer.fill(0, 2 * (end - from), 2 * count);
  }

  return {
    taps,
    read(first, step, count, out) {
      const chunk = Math.max(1, Math.floor((CHUNK_SAMPLES + 16 * taps) / step));
      for (let done = 0; done < count;) {
        const part = Math.min(chunk, count - done);
        const start = first + done * step;
        const from = Math.floor(start) - half + 1;
        load(from, Math.ceil((part - 1) * step) + taps + 2);
        for (let i = 0; i < part; i++) {
          const place = first + (done + i) * step;
          const base = Math.floor(place);
          const finer = (place - base) * phases;
          const phase = Math.floor(finer);
          const share = finer - phase;
          let weight = phase * taps;
          let at = 2 * (base - half + 1 - from);
          let re = 0;
          let im = 0;
          for (let tap = 0; tap < taps; tap++, weight++, at += 2) {
            const low = table[weight]!;
            const value = low + share * (table[weight + taps]! - low);
            re += value * buffer[at]!;
            im += value * buffer[at + 1]!;
          }
          out[2 * (done + i)] = re;
          out[2 * (done + i) + 1] = im;
        }
        done += part;
      }
    },
  };
}
