import type { BenchContent, BenchProfile, MeasuredLevels, WaveformContent, WaveformDocument } from '@/lib/synth';

/** A wide, forgiving 16-bit profile; `changes` replace whole keys. Invented. */
export function wideBench(changes: Partial<BenchContent> = {}): BenchProfile {
  return {
    format: 'combwright.bench',
    version: 1,
    about: { name: 'Bench W', notes: 'Invented for tests.' },
    content: {
      sampleClockHz: { least: 1, most: 1e12, step: null },
      word: 'int16',
      bits: 16,
      align: 'right',
      numberFormat: 'twosComplement',
      byteOrder: 'little',
      layout: 'interleaved',
      container: 'raw',
      swapIq: false,
      negateQ: false,
      granularitySamples: 1,
      leastSamples: 1,
      mostSamples: 1099511627776,
      leastHeadroomDb: 0,
      levelMeans: 'activeRms',
      markers: { count: 4, packing: 'bytes', leastSamples: 1, stepSamples: 1 },
      modes: ['loop', 'burst'],
      fileName: { most: 32, extension: 'bin' },
      ...changes,
    },
  };
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
