import { demand } from '../errors';
import { createTransform, isFiveSmooth } from '../fft/transform';
import { log10 } from '../math/exponential';
import type { OccupiedBand, Spectrum, WindowKind } from './types';
import { createWindow } from './window';

/** How a Welch estimate is taken. Throws SynthError `bad_size` for an overlap of a whole segment or more. */
export interface WelchOptions {
  /** Points of each segment, 5-smooth, 1…2^22. */
  segmentLength: number;
  clockHz: number;
  /** Default Blackman–Harris: its side lobes (−92 dB) leave notches visible. */
  window?: WindowKind;
  /** Default half a segment. */
  overlapSamples?: number;
}

/** A spectrum estimate fed in order. */
export interface WelchEstimate {
  /** `count` samples (interleaved; all of the array by default). The buffer stays the caller's. */
  push(samples: Float64Array, count?: number): void;
  /** The mean over all whole segments so far; all 0 before the first. */
  result(): Spectrum;
}

/** The largest 5-smooth segment that is at most `samples` and `most`; 1 at the least. */
export function welchSegment(samples: number, most = 4096): number {
  let length = Math.max(1, Math.min(samples, most));
  while (!isFiveSmooth(length)) length--;
  return length;
}

/**
 * Welch's method: overlapping windowed periodograms, averaged, two-sided, no trend removed. Density so that Σ density · binHz = mean
 * power for white signals; a tone A at a bin's centre reads |A|²/(ENBW · binHz). Source: Welch, IEEE Trans. AU-15, 1967.
 * Holds one segment; what is pushed is copied. Throws SynthError `bad_size` for a segment or an overlap that cannot be.
 */
export function createWelch(options: WelchOptions): WelchEstimate {
  const { segmentLength, clockHz, window = 'blackmanHarris' } = options;
  const overlap = options.overlapSamples ?? Math.floor(segmentLength / 2);
  demand(overlap >= 0 && overlap < segmentLength, 'bad_size', 'Segments overlap by less than a segment.');
  const transform = createTransform(segmentLength);
  const table = createWindow(window, segmentLength);
  let squares = 0;
  for (const weight of table.weights) squares += weight * weight;
  const held = new Float64Array(2 * segmentLength);
  const windowed = new Float64Array(2 * segmentLength);
  const bins = new Float64Array(2 * segmentLength);
  const sum = new Float64Array(segmentLength);
  let filled = 0;
  let segments = 0;

  function flush(): void {
    for (let i = 0; i < segmentLength; i++) {
      windowed[2 * i] = held[2 * i]! * table.weights[i]!;
      windowed[2 * i + 1] = held[2 * i + 1]! * table.weights[i]!;
    }
    transform.forward(windowed, bins);
    const half = Math.floor(segmentLength / 2);
    for (let i = 0; i < segmentLength; i++) {
      const bin = (i + segmentLength - half) % segmentLength;
      const re = bins[2 * bin]!;
      const im = bins[2 * bin + 1]!;
      sum[i] = sum[i]! + (re * re + im * im);
    }
    segments++;
    held.copyWithin(0, 2 * (segmentLength - overlap));
    filled = overlap;
  }

  return {
    push(samples, count = samples.length / 2) {
      let at = 0;
      while (at < count) {
        const take = Math.min(count - at, segmentLength - filled);
        held.set(samples.subarray(2 * at, 2 * (at + take)), 2 * filled);
        filled += take;
        at += take;
        if (filled === segmentLength) flush();
      }
    },
    result() {
      const scale = segments === 0 ? 0 : 1 / (clockHz * squares * segments);
      const binHz = clockHz / segmentLength;
      return { density: sum.map((value) => value * scale), binHz, window, rbwHz: table.enbwBins * binHz, segments };
    },
  };
}

/**
 * Welch's estimate of interleaved samples at hand (2 numbers each, not changed); the segment is the largest that fits when none is given.
 * Source and errors as createWelch.
 */
export function welchSpectrum(
  samples: Float64Array,
  options: Omit<WelchOptions, 'segmentLength'> & { segmentLength?: number },
): Spectrum {
  const estimate = createWelch({ segmentLength: welchSegment(samples.length / 2), ...options });
  estimate.push(samples);
  return estimate.result();
}

/** Frequency of bin i's centre in Hz, the carrier at 0: the lowest is −⌊n/2⌋ · binHz. */
export function frequencyOfBin(spectrum: Spectrum, bin: number): number {
  return (bin - Math.floor(spectrum.density.length / 2)) * spectrum.binHz;
}

/**
 * The band that holds `ratio` of the power, the rest cut in equal halves at each side. Power is spread evenly within each bin.
 * Null for an empty spectrum. Source: ITU-R SM.328 (occupied bandwidth, 99 %, 0.5 % below and above).
 */
export function occupiedBandwidth(spectrum: Spectrum, ratio = 0.99): OccupiedBand | null {
  const { density, binHz } = spectrum;
  let total = 0;
  for (const value of density) total += value;
  if (!(total > 0)) return null;
  const beyond = ((1 - ratio) / 2) * total;
  const edge = (step: 1 | -1): number => {
    let left = beyond;
    let bin = step === 1 ? 0 : density.length - 1;
    while (density[bin]! < left) {
      left -= density[bin]!;
      bin += step;
    }
    const part = density[bin]! === 0 ? 0 : left / density[bin]!;
    return frequencyOfBin(spectrum, bin) + step * (part - 0.5) * binHz;
  };
  const lowHz = edge(1);
  const highHz = edge(-1);
  return { lowHz, highHz, widthHz: highHz - lowHz };
}

/** Mean and largest density of the bins whose centres lie in lowHz…highHz (inclusive); null when none does. */
export function densityBetween(
  spectrum: Spectrum,
  lowHz: number,
  highHz: number,
): { mean: number; largest: number } | null {
  const half = Math.floor(spectrum.density.length / 2);
  const first = Math.max(0, Math.ceil(lowHz / spectrum.binHz) + half);
  const last = Math.min(spectrum.density.length - 1, Math.floor(highHz / spectrum.binHz) + half);
  if (last < first) return null;
  let sum = 0;
  let largest = 0;
  for (let bin = first; bin <= last; bin++) {
    sum += spectrum.density[bin]!;
    largest = Math.max(largest, spectrum.density[bin]!);
  }
  return { mean: sum / (last - first + 1), largest };
}

/** A hole in the density against the density of the painted band, in dB (negative: a hole), with what it was taken with. */
export interface SpectralNotch {
  meanDb: number | null;
  /** The hole's strongest bin. */
  worstDb: number | null;
  window: WindowKind;
  rbwHz: number;
}

/**
 * Spectral notch: mean (and largest) density in `hole` over the mean density in `band` outside the hole. Null when either holds no bin
 * or the band no power. Not the cell notch: window and resolution bandwidth bound it.
 */
export function spectralNotch(
  spectrum: Spectrum,
  hole: { lowHz: number; highHz: number },
  band: { lowHz: number; highHz: number },
): SpectralNotch {
  const inside = densityBetween(spectrum, hole.lowHz, hole.highHz);
  const half = Math.floor(spectrum.density.length / 2);
  let sum = 0;
  let count = 0;
  const last = Math.min(spectrum.density.length - 1, Math.floor(band.highHz / spectrum.binHz) + half);
  for (let bin = Math.max(0, Math.ceil(band.lowHz / spectrum.binHz) + half); bin <= last; bin++) {
    const hz = (bin - half) * spectrum.binHz;
    if (hz >= hole.lowHz && hz <= hole.highHz) continue;
    sum += spectrum.density[bin]!;
    count++;
  }
  const reference = count === 0 ? 0 : sum / count;
  const over = (value: number | undefined): number | null =>
    value === undefined || reference === 0 ? null : 10 * log10(value / reference);
  return {
    meanDb: over(inside?.mean),
    worstDb: over(inside?.largest),
    window: spectrum.window,
    rbwHz: spectrum.rbwHz,
  };
}
