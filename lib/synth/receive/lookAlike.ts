import type { SampleEngine } from '../engine/types';
import type { SampleSource } from '../measure/reconstructedPeak';
import type { WaveformContent } from '../types';
import { CLOCK_ERROR_MOST_PPM, nearestClockRatio } from './clockRatio';
import { createCycle } from './cycle';
import { mirroredSource, mixedSource } from './sources';
import { captureStatistics } from './statistics';
import { findFrame } from './synchronize';
import { vectorClock } from './receiveCapture';

/** How much a capture looks like one of several contents. */
export interface Likeness {
  /** Place in the list. */
  content: number;
  /** ρ, 0…1; null where it cannot be tried (nothing painted, another clock, longer than the capture). */
  correlation: number | null;
  needed: number;
  isFound: boolean;
  isMirrored: boolean;
  /** Samples of the content's file into its frame at the capture's first sample, and the carrier offset. */
  startSamples: number;
  offsetHz: number;
  /** ρ of each 1/512 of its frame, and the frame's time. */
  curve: Float64Array;
  frameSec: number;
}

export interface LookAlikes {
  step(): boolean;
  readonly doneRatio: number;
  /** Best first. */
  result(): Likeness[];
}

/** Looks for each of `contents` in a capture, plain and mirrored, without measuring any. Steps as createReception's. */
export function createLookAlikes(
  source: SampleSource,
  clockHz: number | null,
  contents: readonly WaveformContent[],
  engine?: SampleEngine,
): LookAlikes {
  const found: Likeness[] = [];
  let done = 0;
  let share = 0;
  let running = contents[0] === undefined ? null : lookFor(source, clockHz, contents[0], 0, engine);
  return {
    get doneRatio() {
      return contents.length === 0 ? 1 : (done + share) / contents.length;
    },
    step() {
      if (running === null) return false;
      const next = running.next();
      if (next.done !== true) {
        share = next.value;
        return true;
      }
      found.push(next.value);
      done++;
      share = 0;
      const content = contents[done];
      running = content === undefined ? null : lookFor(source, clockHz, content, done, engine);
      return running !== null;
    },
    result() {
      while (this.step());
      return [...found].sort((a, b) => (b.correlation ?? -1) - (a.correlation ?? -1));
    },
  };
}

function* lookFor(
  source: SampleSource,
  clockHz: number | null,
  content: WaveformContent,
  place: number,
  engine?: SampleEngine,
): Generator<number, Likeness> {
  const cycle = createCycle(content);
  const fileHz = vectorClock(content);
  const captureHz = clockHz ?? fileHz;
  const clock = nearestClockRatio(captureHz, fileHz);
  const nothing: Likeness = {
    content: place,
    correlation: null,
    needed: 0.3,
    isFound: false,
    isMirrored: false,
    startSamples: 0,
    offsetHz: 0,
    curve: new Float64Array(0),
    frameSec: cycle.periodSamples / fileHz,
  };
  const ratio = clock.p / clock.q;
  const symbolSamples = cycle.layout.usefulSamples * ratio;
  if (cycle.usedCount === 0 || Math.abs(clock.errorPpm) > CLOCK_ERROR_MOST_PPM || source.samples < symbolSamples)
    return nothing;
  const partSamples = Math.ceil(symbolSamples * Math.max(1, Math.min(64, Math.ceil(3000 / cycle.usedCount))));
  const seen = yield* captureStatistics(source, partSamples, false);
  if (seen.isSilent) return nothing;
  const { oversampling, frequencyOffsetHz, subcarrierSpacingHz } = content;
  const from = Math.min(seen.strongestAt, Math.max(0, source.samples - partSamples));
  let best = nothing;
  for (const isMirrored of [false, true]) {
    const heard = isMirrored ? mirroredSource(source) : source;
    const base = mixedSource(heard, frequencyOffsetHz / captureHz);
    const found = yield* findFrame(base, cycle, ratio * oversampling, from, engine);
    if (found.correlation <= (best.correlation ?? -1)) continue;
    const start = found.cyclePlace * oversampling - found.templateAt / ratio;
    best = {
      ...nothing,
      correlation: found.correlation,
      needed: found.needed,
      isFound: found.isFound,
      isMirrored,
      startSamples: start - Math.floor(start / cycle.periodSamples) * cycle.periodSamples,
      offsetHz: (found.offsetSubcarriers * subcarrierSpacingHz[0]) / subcarrierSpacingHz[1],
      curve: found.curve,
    };
  }
  return best;
}
