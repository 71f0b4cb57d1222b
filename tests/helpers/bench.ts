import type { BenchContent, BenchProfile, MeasuredLevels, WaveformContent, WaveformDocument } from '@/lib/synth';
import { openBench } from './documents';

/** The open bench with bytes for markers and a setting that means the active part's mean; `changes` replace whole keys. */
export function wideBench(changes: Partial<BenchContent> = {}): BenchProfile {
  return openBench({
    mostSamples: 2 ** 40,
    levelMeans: 'activeRms',
    markers: { count: 4, packing: 'bytes', leastSamples: 1, stepSamples: 1 },
    ...changes,
  });
}

/** A whole document around a content. */
export function documentOf(
  content: WaveformContent,
  intent: Partial<WaveformDocument['intent']> = {},
): WaveformDocument {
  return {
    format: 'combwright.waveform',
    version: 1,
    about: { title: 'Test signal', notes: '', basedOn: null },
    content,
    intent: {
      outputRmsDbm: null,
      lossDb: 0,
      devicePeakLimitDbm: null,
      deviceMeanLimitDbm: null,
      levelToleranceDb: 1,
      ...intent,
    },
  };
}

/** Levels of an ordinary file: peak 1 dB below full scale, 9.05 dB above the active mean, no gaps. */
export function measuredLevels(changes: Partial<MeasuredLevels> = {}): MeasuredLevels {
  return {
    fileRmsDbfs: -10.05,
    activeRmsDbfs: -10.05,
    renderedPeakDbfs: -1,
    reconstructedPeakDbfs: -1.02,
    saturatedComponents: 0,
    ...changes,
  };
}
