import { createDemodulator } from './demodulate';
import type { SampleEngine } from '../engine/types';
import { quantize } from '../quantize/quantize';
import { createSynthesis } from '../synthesize/synthesis';
import type { WaveformContent } from '../types';
import { createCycle } from './cycle';
import { createNullPowerMeter } from './nullPower';
import type { NullPower } from './types';

const BLOCK_SAMPLES = 16384;
/** Samples of a file that are looked at: its first repeat, as far as that goes. */
const SAMPLES_MOST = 4194304;

/**
 * The power in the null cells of the file itself: what its words' rounding leaves there, beside which a capture's stands. `scale`: words per
 * unit of x, `fullScale` F, of integers. First repeat, at most 2^22 samples. Null where nothing was found.
 */
export function fileNullPower(
  content: WaveformContent,
  words: { scale: number; fullScale: number },
  engine?: SampleEngine,
): NullPower | null {
  const cycle = createCycle(content);
  if (cycle.usedCount === 0 || !(words.scale > 0)) return null;
  const meter = createNullPowerMeter(cycle, content.fftSize);
  const synthesis = createSynthesis(content, { engine });
  const demodulator = createDemodulator(content, (_repeat, symbol, values) => meter.add(symbol, values));
  const most = Math.min(cycle.layout.repeatSamples, SAMPLES_MOST, synthesis.samples);
  const block = new Float64Array(2 * BLOCK_SAMPLES);
  const rounded = new Int16Array(2 * BLOCK_SAMPLES);
  const saturated = { components: 0, samples: 0 };
  for (let done = 0; done < most;) {
    const count = synthesis.read(block.subarray(0, 2 * Math.min(BLOCK_SAMPLES, most - done)));
    if (count === 0) break;
    quantize(block, count, words.scale, words.fullScale, rounded, saturated);
    for (let i = 0; i < 2 * count; i++) block[i] = rounded[i]! / words.scale;
    demodulator.push(block, count);
    done += count;
  }
  return demodulator.symbolsFound === 0 ? null : meter.result();
}
