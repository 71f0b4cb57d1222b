import { createSum } from '../math/sums';
import type { SampleSource } from '../measure/reconstructedPeak';

/** What a capture's samples are by themselves. Powers are of samples in which full scale is 1. */
export interface CaptureStatistics {
  samples: number;
  meanPower: number;
  peakPower: number;
  meanI: number;
  meanQ: number;
  /** Samples with a component at the converter's limit: at ± full scale, or at the largest value where the capture piles up there. */
  clippedSamples: number;
  /** The limit they stand at; null where nothing is clipped. */
  clipLevel: number | null;
  isSilent: boolean;
  /** First sample with a component that is not a number, counted from 0; null where all are. Such components count as 0 here. */
  firstNotNumber: number | null;
  /** First sample of the strongest part (the earliest that comes within 0.5 dB of it). */
  strongestAt: number;
}

const BLOCK_SAMPLES = 65536;
/** A capture piles up at its largest value when it stands there so often, and for so large a share. */
const PILED_LEAST = 8;
const PILED_SHARE = 5e-5;

/**
 * Reads the whole capture once; `partSamples`: length of the part that is looked for; `hasRails`: the words end at ± full scale (integers).
 * A generator: each `yield` is the share done.
 */
export function* captureStatistics(
  source: SampleSource,
  partSamples: number,
  hasRails: boolean,
): Generator<number, CaptureStatistics> {
  const block = new Float64Array(2 * BLOCK_SAMPLES);
  const power = createSum();
  const sumI = createSum();
  const sumQ = createSum();
  let peakPower = 0;
  let largest = 0;
  let atLargest = 0; // samples with a component of that size
  let railed = 0;
  let firstNotNumber: number | null = null;
  // energies of pieces, for the strongest part
  const piece = Math.max(64, Math.ceil(Math.max(partSamples / 8, source.samples / 1048576)));
  const energies = new Float64Array(Math.ceil(source.samples / piece));
  for (let first = 0; first < source.samples; first += BLOCK_SAMPLES) {
    const count = Math.min(BLOCK_SAMPLES, source.samples - first);
    source.read(first, count, block);
    let blockPower = 0;
    let blockI = 0;
    let blockQ = 0;
    for (let i = 0; i < 2 * count; i += 2) {
      let re = block[i]!;
      let im = block[i + 1]!;
      if (Number.isNaN(re) || Number.isNaN(im)) {
        firstNotNumber ??= first + i / 2;
        re = Number.isNaN(re) ? 0 : re;
        im = Number.isNaN(im) ? 0 : im;
      }
      const here = re * re + im * im;
      blockPower += here;
      blockI += re;
      blockQ += im;
      if (here > peakPower) peakPower = here;
      const high = Math.max(Math.abs(re), Math.abs(im));
      if (hasRails && high >= 1) railed++;
      if (high > largest) {
        largest = high;
        atLargest = 1;
      } else if (high === largest) atLargest++;
      const at = Math.floor((first + i / 2) / piece);
      energies[at] = energies[at]! + here;
    }
    power.add(blockPower);
    sumI.add(blockI);
    sumQ.add(blockQ);
    yield (first + count) / source.samples;
  }
  const isPiled = railed === 0 && atLargest >= PILED_LEAST && atLargest >= PILED_SHARE * source.samples;
  const clippedSamples = railed > 0 ? railed : isPiled ? atLargest : 0;
  return {
    samples: source.samples,
    meanPower: power.total() / source.samples,
    peakPower,
    meanI: sumI.total() / source.samples,
    meanQ: sumQ.total() / source.samples,
    clippedSamples,
    clipLevel: clippedSamples === 0 ? null : railed > 0 ? 1 : largest,
    isSilent: peakPower === 0,
    firstNotNumber,
    strongestAt: strongestPart(energies, Math.max(1, Math.round(partSamples / piece))) * piece,
  };
}

/** The first window of `width` pieces whose energy is within 0.5 dB of the largest. */
function strongestPart(energies: Float64Array, width: number): number {
  const windows = Math.max(1, energies.length - width); // the last piece may be short
  let sum = 0;
  for (let i = 0; i < Math.min(width, energies.length); i++) sum += energies[i]!;
  const sums = new Float64Array(windows);
  for (let at = 0; at < windows; at++) {
    sums[at] = sum;
    sum += (energies[at + width] ?? 0) - energies[at]!;
  }
  const most = sums.reduce((largest, value) => Math.max(largest, value), 0);
  return sums.findIndex((value) => value >= 0.89 * most);
}
