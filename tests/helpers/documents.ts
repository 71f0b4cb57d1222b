import { emptyDocument } from '@/lib/document/newDocument';
import type { BenchContent, BenchProfile, WaveformContent, WaveformDocument } from '@/lib/synth/index';

/** 64 subcarriers × 4 symbols: a data band either side of a bare DC with four pilots, anchored payload. Small and quick. */
export function smallDocument(overrides: Partial<WaveformContent> = {}): WaveformDocument {
  return emptyDocument({
    title: 'Small test waveform',
    content: {
      fftSize: 64,
      subcarrierSpacingHz: [312500, 1],
      symbolCount: 4,
      prefixSamples: [16],
      tray: [
        { inkId: 'k0', name: 'Null', role: 'null', powerDb: 0, value: null },
        {
          inkId: 'k1',
          name: 'Data',
          role: 'data',
          powerDb: 0,
          value: { constellation: 'qpsk', bitMap: 'ts38211', streamId: 's0' },
        },
        {
          inkId: 'k2',
          name: 'Pilots',
          role: 'pilot',
          powerDb: 0,
          value: { factors: [{ sequence: { kind: 'alternating' }, counter: 'symbolCell', start: 0 }] },
        },
      ],
      // k = −32…−27 bare, data to 26 with pilots at ±7 and ±21, DC bare
      grid: {
        rows: [[6, 0, 5, 1, 1, 2, 13, 1, 1, 2, 6, 1, 1, 0, 6, 1, 1, 2, 13, 1, 1, 2, 5, 1, 5, 0]],
        rowOfSymbol: [0, 0, 0, 0],
      },
      ...overrides,
    },
  });
}

/** A bench that takes almost everything: int16, little-endian, interleaved, raw, no markers. */
export function openBench(overrides: Partial<BenchContent> = {}): BenchProfile {
  return {
    format: 'combwright.bench',
    version: 1,
    about: { name: 'Test bench, 16 bit', notes: 'Invented.' },
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
      mostSamples: 1e9,
      leastHeadroomDb: 0,
      levelMeans: 'fileRms',
      markers: { count: 0, packing: 'none', leastSamples: 1, stepSamples: 1 },
      modes: ['loop', 'burst'],
      fileName: { most: 40, extension: 'sigmf-data' },
      ...overrides,
    },
  };
}
