import { writeUnitOfTurns } from '../math/turns';
import type { SampleSource } from '../measure/reconstructedPeak';

const ANCHOR_SAMPLES = 256;

/**
 * The source times e^{−j2π·turns·n}, n from its first sample: a carrier at `turns` (cycles per sample, −½…½) comes to 0 Hz.
 * Each sample errs by the rounding of turns·n (below 1e-7 turns up to 2^30 samples).
 */
export function mixedSource(source: SampleSource, turns: number): SampleSource {
  if (turns === 0) return source;
  const table = new Float64Array(2 * ANCHOR_SAMPLES);
  for (let i = 0; i < ANCHOR_SAMPLES; i++) writeUnitOfTurns(-turns * i, 0, table, 2 * i);
  const anchor = new Float64Array(2);
  return {
    samples: source.samples,
    read(first, count, out) {
      source.read(first, count, out);
      for (let i = 0; i < count;) {
        const from = (first + i) % ANCHOR_SAMPLES;
        writeUnitOfTurns(-turns * (first + i - from), 0, anchor, 0);
        const aRe = anchor[0]!;
        const aIm = anchor[1]!;
        const part = Math.min(count - i, ANCHOR_SAMPLES - from);
        for (let j = 0, d = 2 * i, t = 2 * from; j < part; j++, d += 2, t += 2) {
          const uRe = aRe * table[t]! - aIm * table[t + 1]!;
          const uIm = aRe * table[t + 1]! + aIm * table[t]!;
          const re = out[d]!;
          const im = out[d + 1]!;
          out[d] = re * uRe - im * uIm;
          out[d + 1] = re * uIm + im * uRe;
        }
        i += part;
      }
    },
  };
}

/** The source with Q negated: its spectrum mirrored. Swapped I and Q is the same times j, which no receiver can tell from a phase. */
export function mirroredSource(source: SampleSource): SampleSource {
  return {
    samples: source.samples,
    read(first, count, out) {
      source.read(first, count, out);
      for (let i = 1; i < 2 * count; i += 2) out[i] = 0 - out[i]!;
    },
  };
}

/** The value 1 at every place: what a receiver's own DC looks like. */
export function constantSource(samples: number): SampleSource {
  return {
    samples,
    read(_first, count, out) {
      for (let i = 0; i < 2 * count; i += 2) {
        out[i] = 1;
        out[i + 1] = 0;
      }
    },
  };
}
