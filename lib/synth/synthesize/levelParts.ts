import { demand } from '../errors';
import { addSamples, addTo, closePart, LEVEL_STATE_LENGTH, PART_SAMPLES, takePart, type PartSums } from './levelState';
import type { StatsCollector, Synthesis } from './types';

/** Levels of a stretch of a rendering, not added up yet. All numbers, so that a thread can hand it to another. */
export interface LevelParts {
  samples: number;
  /** Power, re and im summed over each 128 samples in order: three numbers a part. */
  sums: Float64Array;
  /** Largest |x|² and the first file sample that has it (0 and 0 where all are silent). */
  peakPower: number;
  peakAt: number;
  /** Largest |I| and |Q|. */
  mostRe: number;
  mostIm: number;
}

/**
 * Measures the next `samples` samples of a synthesis. It must stand at a multiple of 128, and `samples` be one or reach the end: then
 * these are the parts that a collector over the whole file closes.
 * Throws SynthError `bad_index` elsewhere.
 */
export function collectLevelParts(synthesis: Synthesis, samples: number): LevelParts {
  const first = synthesis.position;
  demand(
    first % PART_SAMPLES === 0 && (samples % PART_SAMPLES === 0 || first + samples === synthesis.samples),
    'bad_index',
    'Levels are taken in whole parts of 128 samples.',
  );
  const state = new Float64Array(LEVEL_STATE_LENGTH);
  state[9] = first;
  const partSums: PartSums = { numbers: new Float64Array(3 * Math.ceil(samples / PART_SAMPLES)), count: 0 };
  const collector: Omit<StatsCollector, 'stats'> = {
    state,
    partSums,
    add(data, at, count) {
      for (let done = 0; done < count;) {
        const room = PART_SAMPLES - state[8]!;
        const part = Math.min(count - done, room);
        addSamples(state, data, at + done, part);
        if (part === room) takePart(state, 0, partSums);
        done += part;
      }
    },
  };
  for (let left = samples; left > 0;) {
    const count = synthesis.collect(collector, left);
    demand(count > 0, 'bad_index', 'No such samples.');
    left -= count;
  }
  if (state[8]! > 0) {
    closePart(state);
    takePart(state, 0, partSums);
  }
  return {
    samples,
    sums: partSums.numbers,
    peakPower: state[10]!,
    peakAt: state[11]!,
    mostRe: state[12]!,
    mostIm: state[13]!,
  };
}

/** Adds levels that were measured elsewhere to a collector, stretch after stretch in the file's order: the bits of one collector over all. */
export function addLevelParts(collector: StatsCollector, parts: LevelParts): void {
  const { state } = collector;
  const { sums } = parts;
  for (let at = 0; at < sums.length; at += 3) {
    addTo(state, 14, sums[at]!);
    addTo(state, 16, sums[at + 1]!);
    addTo(state, 18, sums[at + 2]!);
  }
  state[9] = state[9]! + parts.samples;
  if (parts.peakPower > state[10]!) {
    state[10] = parts.peakPower;
    state[11] = parts.peakAt;
  }
  state[12] = Math.max(state[12]!, parts.mostRe);
  state[13] = Math.max(state[13]!, parts.mostIm);
}
