import type { WaveformContent, WaveformDocument, WaveformIntent } from '@/lib/synth/index';

/** What a new document means at the device: nothing yet, no loss, no limits, 1 dB of level tolerance. */
export const newIntent = (): WaveformIntent => ({
  outputRmsDbm: null,
  lossDb: 0,
  devicePeakLimitDbm: null,
  deviceMeanLimitDbm: null,
  levelToleranceDb: 1,
});

export interface NewDocumentOptions {
  title?: string;
  notes?: string;
  basedOn?: string | null;
  content?: Partial<WaveformContent>;
}

/** A bare grid with the defaults of new documents: null ink alone, one anchored PN15 stream, interpolated peak at 1 dB. */
export function emptyDocument(options: NewDocumentOptions = {}): WaveformDocument {
  const fftSize = options.content?.fftSize ?? 64;
  const symbolCount = options.content?.symbolCount ?? 14;
  return {
    format: 'combwright.waveform',
    version: 1,
    about: {
      title: options.title ?? 'Untitled waveform',
      notes: options.notes ?? '',
      basedOn: options.basedOn ?? null,
    },
    content: {
      fftSize,
      subcarrierSpacingHz: [15000, 1],
      symbolCount,
      prefixSamples: [Math.floor(fftSize / 8)],
      overlapSamples: 0,
      oversampling: 1,
      frequencyOffsetHz: 0,
      timing: { mode: 'loop', repeats: 1, gapSamples: 0, padSamples: 0 },
      tray: [{ inkId: 'k0', name: 'Null', role: 'null', powerDb: 0, value: null }],
      grid: { rows: [[fftSize, 0]], rowOfSymbol: new Array<number>(symbolCount).fill(0) },
      streams: [
        {
          streamId: 's0',
          name: 'Payload',
          source: { kind: 'pn', stages: 15, taps: [14, 15], seed: 32767, inverted: true },
          fill: 'anchored',
          acrossRepeats: 'restart',
        },
      ],
      peakReduction: { kind: 'none' },
      level: { reference: 'interpolatedPeak', headroomDb: 1 },
      markers: [],
      ...options.content,
    },
    intent: newIntent(),
  };
}
