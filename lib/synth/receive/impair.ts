import { demand } from '../errors';
import { amplitudeOfDecibels, powerOfDecibels } from '../math/exponential';
import { sineCosine, writeUnitOfTurns } from '../math/turns';
import type { SampleSource } from '../measure/reconstructedPeak';
import { createNoise } from './noise';
import { createResampler } from './resample';

/** One path of the channel. */
export interface ChannelTap {
  /** Samples of the vector, 0 or later; may be a fraction. */
  delaySamples: number;
  gainDb: number;
  phaseDeg: number;
}

/** What happens to a vector on its way into a test capture, in this order. Zeros and nulls leave it as it is. */
export interface Impairments {
  /** 0…2^32−1: decides the noise. */
  seed: number;
  taps: ChannelTap[];
  /** The capture's clock over the vector's as p/q, and its error. */
  clockRatio: [p: number, q: number];
  clockErrorPpm: number;
  /** The vector's first sample stands so many vector samples after the capture's first one; negative: the capture begins inside. */
  delaySamples: number;
  frequencyOffsetHz: number;
  gainDb: number;
  phaseDeg: number;
  /** The receiver's I/Q imbalance: I·√g, Q/√g, and the angle between the axes 90° + phase. */
  imbalanceDb: number;
  imbalanceDeg: number;
  /** Relative to full scale 1. */
  dcI: number;
  dcQ: number;
  /** Mean power of the signal (after channel and gain) over noise power in the capture's whole band; null: no noise. */
  snrDb: number | null;
  /** Components are limited to ± this level, dB to full scale 1; null: not limited here. */
  clipDbfs: number | null;
}

/** No impairment at all. */
export const noImpairments: Impairments = {
  seed: 1,
  taps: [],
  clockRatio: [1, 1],
  clockErrorPpm: 0,
  delaySamples: 0,
  frequencyOffsetHz: 0,
  gainDb: 0,
  phaseDeg: 0,
  imbalanceDb: 0,
  imbalanceDeg: 0,
  dcI: 0,
  dcQ: 0,
  snrDb: null,
  clipDbfs: null,
};

/** A vector to be impaired: once (burst) or round and round (loop), with its mean power where it is active. */
export interface ImpairedVector {
  source: SampleSource;
  clockHz: number;
  mode: 'loop' | 'burst';
  meanPower: number;
  /** Highest frequency that the vector uses, cycles per sample; 0.45 where it is not known. */
  usedTurns: number;
}

/** A test capture, read in order. */
export interface ImpairedCapture {
  /** The capture's clock. */
  readonly clockHz: number;
  /** The next `count` samples, interleaved, not limited to ±1 but by clipDbfs. */
  read(count: number, out: Float64Array): void;
}

/** The vector repeated for ever, with room before its first sample. */
function loopedSource(source: SampleSource): SampleSource {
  return {
    samples: Number.MAX_SAFE_INTEGER,
    read(first, count, out) {
      let at = first % source.samples;
      for (let done = 0; done < count;) {
        const part = Math.min(count - done, source.samples - at);
        source.read(at, part, out.subarray(2 * done, 2 * (done + part)));
        done += part;
        at = 0;
      }
    },
  };
}

/**
 * Makes a test capture of a vector: x[m] = g·e^{j2πf·m/fc} Σ h_i·v(m/R − delay − d_i), then imbalance, DC, noise and clipping. Values
 * between the vector's samples by windowed sinc (90 dB). Equal arguments give equal bits.
 * Throws SynthError `bad_size` for a ratio outside 1…64 or a silent vector with noise.
 */
export function createImpairedCapture(vector: ImpairedVector, impairments: Impairments): ImpairedCapture {
  const [p, q] = impairments.clockRatio;
  const isRatio = (value: number): boolean => Number.isInteger(value) && value >= 1 && value <= 64;
  demand(isRatio(p) && isRatio(q), 'bad_size', 'A clock ratio has whole numbers of 1 to 64.');
  demand(impairments.snrDb === null || vector.meanPower > 0, 'bad_size', 'A silent vector has no SNR.');
  const ratio = (p / q) * (1 + impairments.clockErrorPpm * 1e-6);
  const taps = impairments.taps.length > 0 ? impairments.taps : [{ delaySamples: 0, gainDb: 0, phaseDeg: 0 }];
  const gains = taps.map((tap) => {
    const { cosine, sine } = sineCosine((tap.phaseDeg + impairments.phaseDeg) / 360);
    const size = amplitudeOfDecibels(tap.gainDb + impairments.gainDb);
    return { re: size * cosine, im: size * sine, delay: tap.delaySamples };
  });
  const isLoop = vector.mode === 'loop';
  const source = isLoop ? loopedSource(vector.source) : vector.source;
  // a slower capture has its own band's limit before it
  const limit = 0.5 * Math.min(1, ratio);
  const used = Math.min(vector.usedTurns, 0.96 * limit);
  const resampler = createResampler(source, {
    passTurns: used,
    stopTurns: limit < 0.5 ? limit + (limit - used) : 1 - used,
    mostTaps: 1024,
  });
  const period = vector.source.samples;
  const lead = isLoop ? period * Math.ceil((Math.abs(impairments.delaySamples) + 4096 + maxDelay(taps)) / period) : 0;
  const noise = createNoise(impairments.seed);
  let power = 0;
  for (const gain of gains) power += gain.re * gain.re + gain.im * gain.im;
  const noiseSize =
    impairments.snrDb === null ? 0 : Math.sqrt((power * vector.meanPower) / powerOfDecibels(impairments.snrDb));
  const clockHz = vector.clockHz * ratio;
  const turns = impairments.frequencyOffsetHz / clockHz;
  const stretch = amplitudeOfDecibels(impairments.imbalanceDb / 2);
  const skew = sineCosine(impairments.imbalanceDeg / 360);
  const clip = impairments.clipDbfs === null ? Infinity : amplitudeOfDecibels(impairments.clipDbfs);
  let at = 0;
  let path = new Float64Array(0);
  const unit = new Float64Array(2);
  return {
    clockHz,
    read(count, out) {
      if (path.length < 2 * count) path = new Float64Array(2 * count);
      out.fill(0, 0, 2 * count);
      for (const gain of gains) {
        let first = at / ratio - impairments.delaySamples - gain.delay;
        if (isLoop) first = (first % period) + lead;
        resampler.read(first, 1 / ratio, count, path);
        for (let i = 0; i < 2 * count; i += 2) {
          out[i] = out[i]! + gain.re * path[i]! - gain.im * path[i + 1]!;
          out[i + 1] = out[i + 1]! + gain.re * path[i + 1]! + gain.im * path[i]!;
        }
      }
      for (let i = 0; i < count; i++) {
        let re = out[2 * i]!;
        let im = out[2 * i + 1]!;
        if (turns !== 0) {
          writeUnitOfTurns(turns * (at + i), 0, unit, 0);
          const turned = re * unit[0]! - im * unit[1]!;
          im = re * unit[1]! + im * unit[0]!;
          re = turned;
        }
        const q = (im * skew.cosine + re * skew.sine) / stretch + impairments.dcQ;
        re = re * stretch + impairments.dcI;
        im = q;
        if (noiseSize > 0) {
          noise.normal(unit, 0);
          re += noiseSize * unit[0]!;
          im += noiseSize * unit[1]!;
        }
        out[2 * i] = Math.min(clip, Math.max(-clip, re));
        out[2 * i + 1] = Math.min(clip, Math.max(-clip, im));
      }
      at += count;
    },
  };
}

function maxDelay(taps: ChannelTap[]): number {
  return taps.reduce((most, tap) => Math.max(most, tap.delaySamples), 0);
}
