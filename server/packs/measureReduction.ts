import { setImmediate } from 'node:timers/promises';
import { createReductionMeasure, meanPowerBefore, type ReductionReport, type WaveformContent } from '@/lib/synth';
import { sampleEngine } from '../sampleEngine.ts';
import { throwIfCancelled } from './packError.ts';

/** What a document's peak reduction came to, and the mean power that its target stands over. */
export interface MeasuredReduction {
  report: ReductionReport;
  powerBefore: number;
}

const stepsAtOnce = 16;

/** Every symbol's reduction once more, for the manifest; null where the document has none. */
export async function measureReduction(
  content: WaveformContent,
  signal?: AbortSignal,
): Promise<MeasuredReduction | null> {
  if (content.peakReduction.kind === 'none') return null;
  const engine = sampleEngine();
  const powerBefore = meanPowerBefore(content, { engine });
  const measuring = createReductionMeasure(content, { engine, powerBefore: () => powerBefore })!;
  for (let step = 1; measuring.step(); step++) {
    throwIfCancelled(signal);
    if (step % stepsAtOnce === 0) await setImmediate();
  }
  return { report: measuring.result(), powerBefore };
}
