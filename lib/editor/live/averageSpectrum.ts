import { createTransform, createWindow, sineCosine, welchSegment } from '@/lib/synth/index';
import type { Spectrum } from '@/lib/synth/index';
import type { Waveform } from './waveform';

/** Numbers kept for all symbols' periodograms together; beyond, evenly spread symbols stand for the frame. */
const KEPT_MOST = 2 ** 24;

/** Welch's average, kept by symbol so that an edit costs the symbols it touched. */
export interface AverageSpectrum {
  /** Takes the symbol's two segments anew: they begin at its first and middle sample and reach into the next symbol. */
  refresh(symbol: number, waveform: Waveform): void;
  /** The average so far, lowest frequency first; bin i of `density` stands at (i − ⌊n/2⌋) · binHz. */
  spectrum(): Spectrum;
  readonly recipe: string;
}

export function createAverageSpectrum(
  usefulSamples: number,
  symbolCount: number,
  clockHz: number,
  turnsPerSample: number,
): AverageSpectrum {
  const length = welchSegment(usefulSamples, usefulSamples);
  const transform = createTransform(length);
  const table = createWindow('blackmanHarris', length);
  const every = Math.ceil((length * symbolCount) / KEPT_MOST);
  const kept: (Float32Array | undefined)[] = new Array<Float32Array | undefined>(Math.ceil(symbolCount / every));
  const total = new Float64Array(length);
  const windowed = new Float64Array(2 * length);
  const bins = new Float64Array(2 * length);
  let samples = new Float64Array(0);
  let segments = 0;
  let squares = 0;
  for (const weight of table.weights) squares += weight * weight;

  // The offset turns every segment alike: only its course within one counts for a power.
  const turn = turnsPerSample === 0 ? null : new Float64Array(2 * length);
  for (let i = 0; turn && i < length; i++) {
    const { sine, cosine } = sineCosine((turnsPerSample * i) % 1);
    turn[2 * i] = cosine;
    turn[2 * i + 1] = sine;
  }

  function addSegment(first: number, into: Float32Array): void {
    for (let i = 0; i < length; i++) {
      const weight = table.weights[i]!;
      const re = weight * samples[2 * (first + i)]!;
      const im = weight * samples[2 * (first + i) + 1]!;
      windowed[2 * i] = turn ? re * turn[2 * i]! - im * turn[2 * i + 1]! : re;
      windowed[2 * i + 1] = turn ? re * turn[2 * i + 1]! + im * turn[2 * i]! : im;
    }
    transform.forward(windowed, bins);
    const half = Math.floor(length / 2);
    for (let i = 0, bin = length - half; i < length; i++, bin++) {
      const at = 2 * (bin >= length ? bin - length : bin);
      into[i]! += bins[at]! * bins[at]! + bins[at + 1]! * bins[at + 1]!;
    }
  }

  const recipe =
    `Welch, Blackman–Harris window of ${length} samples, of the rendered samples` +
    (every > 1 ? `, every ${every}th symbol` : '');

  return {
    refresh(symbol, waveform) {
      if (symbol % every !== 0) return;
      const middle = Math.floor((waveform.prefixOf(symbol) + waveform.usefulSamples) / 2);
      const count = middle + length;
      if (samples.length < 2 * count) samples = new Float64Array(2 * count);
      waveform.write(symbol, count, samples);
      let own = kept[symbol / every];
      if (own) for (let i = 0; i < length; i++) total[i]! -= own[i]!;
      else {
        own = new Float32Array(length);
        kept[symbol / every] = own;
        segments += 2;
      }
      own.fill(0);
      addSegment(0, own);
      addSegment(middle, own);
      for (let i = 0; i < length; i++) total[i]! += own[i]!;
    },
    spectrum() {
      const scale = segments === 0 ? 0 : 1 / (clockHz * squares * segments);
      const binHz = clockHz / length;
      const density = total.map((value) => (value > 0 ? value * scale : 0));
      return { density, binHz, window: 'blackmanHarris', rbwHz: table.enbwBins * binHz, segments };
    },
    recipe,
  };
}
