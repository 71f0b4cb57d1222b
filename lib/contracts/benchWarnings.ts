import { z } from '@/lib/document/zod';
import type { benchProfileSchema } from '@/lib/document/benchSchema';

type BenchContent = z.infer<typeof benchProfileSchema>['content'];

/** A contradiction within a profile that may be saved all the same; `use` is a value that mends it, where one does. */
export const benchWarningSchema = z
  .object({ pointer: z.string(), message: z.string(), use: z.number().nullable() })
  .meta({ id: 'BenchWarning' });
export type BenchWarning = z.infer<typeof benchWarningSchema>;

const warn = (pointer: string, message: string, use: number | null = null): BenchWarning => ({
  pointer: `/content/${pointer}`,
  message,
  use,
});

/** What in a right profile contradicts itself, field by field, for the form and the page. */
export function benchWarnings(content: BenchContent): BenchWarning[] {
  const { granularitySamples: grain, leastSamples, mostSamples, sampleClockHz: clock, markers } = content;
  const warnings: BenchWarning[] = [];
  const leastLoaded = Math.ceil(leastSamples / grain) * grain;
  const mostLoaded = Math.floor(mostSamples / grain) * grain;
  if (leastLoaded > mostLoaded) {
    const words = `No multiple of ${grain} lies between the shortest and the longest length: nothing loads.`;
    warnings.push(warn('granularitySamples', words));
  } else {
    if (leastLoaded !== leastSamples)
      warnings.push(warn('leastSamples', `Not a multiple of ${grain}: nothing that short loads.`, leastLoaded));
    if (mostLoaded !== mostSamples)
      warnings.push(warn('mostSamples', `Not a multiple of ${grain}: nothing that long loads.`, mostLoaded));
  }
  if (clock.step !== null && Math.floor(clock.most / clock.step) * clock.step < clock.least) {
    const words = 'No multiple of the step lies between the lowest and the highest clock: no clock can be set.';
    warnings.push(warn('sampleClockHz/step', words));
  }
  if (markers.count > 0) {
    const { leastSamples: shortest, stepSamples: step } = markers;
    const up = Math.ceil(shortest / step) * step;
    if (up !== shortest)
      warnings.push(warn('markers/leastSamples', `Not a multiple of ${step}: no marker is that short.`, up));
    if (markers.packing === 'lowBits') {
      const freeBits = 2 * (16 - content.bits); // of I and of Q
      if (freeBits < markers.count)
        warnings.push(warn('markers/count', `The words of a sample leave ${freeBits} low bits free.`, freeBits));
    }
  }
  return warnings;
}
