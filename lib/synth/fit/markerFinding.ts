import { fileSamples, prefixSum } from '../numerology';
import type { BenchContent, WaveformContent } from '../types';
import type { Finding } from './types';
import { counted, spell } from './words';

/** Whether the bench has as many markers, and can place and hold each mark. */
export function markers(content: WaveformContent, limits: BenchContent): Finding {
  const { count, leastSamples, stepSamples } = limits.markers;
  const used = content.markers.length;
  const names = content.markers.map((marker) => marker.name).join(', ');
  const base = {
    check: 'markers',
    title: 'Markers',
    unit: 'markers',
    measured: used,
    limit: count,
    hard: true,
    found: used === 0 ? `none of ${spell(count)}` : `${spell(used)} of ${spell(count)}, ${names}`,
  } as const;
  if (used > count) {
    return {
      ...base,
      distance: used - count,
      verdict: 'misses',
      byHowMuch: `${counted(used - count, 'marker')} too many`,
      words: `${counted(used, 'marker')}; this bench has ${spell(count)}.`,
    };
  }
  const miss = (measured: number, limit: number, distance: number, byHowMuch: string, words: string): Finding => ({
    ...base,
    unit: 'samples',
    measured,
    limit,
    distance,
    verdict: 'misses',
    byHowMuch,
    words,
  });
  for (const marker of content.markers) {
    const length = marker.lengthSamples;
    if (length < leastSamples) {
      return miss(
        length,
        leastSamples,
        leastSamples - length,
        `${counted(leastSamples - length, 'sample')} short`,
        `“${marker.name}” lasts ${counted(length, 'sample')}; the shortest mark has ${spell(leastSamples)}.`,
      );
    }
    const starts = markerStarts(content, marker);
    const off = starts.find((start) => start % stepSamples !== 0);
    if (off !== undefined || length % stepSamples !== 0) {
      const at = off ?? length;
      const part = off !== undefined ? `begins at sample ${spell(off)}` : `lasts ${counted(length, 'sample')}`;
      const over = ((at % stepSamples) + stepSamples) % stepSamples;
      const distance = Math.min(over, stepSamples - over);
      return miss(
        at,
        at - over + (distance === over ? 0 : stepSamples),
        distance,
        `${counted(distance, 'sample')} off the step`,
        `“${marker.name}” ${part}; marks stand on multiples of ${spell(stepSamples)} samples.`,
      );
    }
    if (content.timing.mode === 'burst') {
      const samples = fileSamples(content);
      const before = Math.max(0, ...starts.map((start) => -start));
      const behind = Math.max(0, ...starts.map((start) => start + length - samples));
      if (before > 0 || behind > 0) {
        return miss(
          behind > 0 ? samples + behind : -before,
          behind > 0 ? samples : 0,
          Math.max(before, behind),
          `${counted(Math.max(before, behind), 'sample')} outside the file`,
          `“${marker.name}” reaches past ${before > 0 ? 'the beginning' : 'the end'} of the burst.`,
        );
      }
    }
  }
  return {
    ...base,
    distance: used - count,
    verdict: 'meets',
    byHowMuch: '',
    words: used === 0 ? 'No markers are used.' : `${counted(used, 'marker')} of ${spell(count)}: ${names}.`,
  };
}

/**
 * Where a marker's marks begin in the file. Of many repeats the first two and the last: if the first stands on the step, so does every
 * other when the second does, and the outermost reach furthest past the ends.
 */
export function markerStarts(content: WaveformContent, marker: WaveformContent['markers'][number]): number[] {
  const { oversampling, fftSize, symbolCount, prefixSamples, timing } = content;
  if (marker.at === 'file') return [marker.offsetSamples];
  const repeat = (prefixSum(content) + symbolCount * fftSize + timing.gapSamples) * oversampling;
  const origins = [...new Set([0, Math.min(1, timing.repeats - 1), timing.repeats - 1])];
  if (marker.at === 'repeat') return origins.map((r) => r * repeat + marker.offsetSamples);
  const starts: number[] = [];
  let at = 0;
  for (let l = 0; l < symbolCount; l++) {
    if (marker.symbol === null || marker.symbol === l) {
      for (const r of origins) starts.push(r * repeat + at * oversampling + marker.offsetSamples);
    }
    at += prefixSamples[l % prefixSamples.length]! + fftSize;
  }
  return starts;
}
