import type { Factor, ToneInk } from '@/lib/synth/index';
import { paintedGrid } from '../paintedGrid';
import { benchPreset, type Preset, type PresetNumbers } from './preset';
import { dataInk, nullInk, pilotInk } from './presetParts';

const tone = (name: string, factors: Factor[] = []): ToneInk => ({
  inkId: 'k1',
  name,
  role: 'tone',
  powerDb: 0,
  value: { factors, phaseDeg: 0, continuous: true },
});

/** A grid that looks alike in every symbol. */
const alike = ({ fftSize, symbolCount }: PresetNumbers, inkOf: (subcarrier: number) => number) =>
  paintedGrid(fftSize, symbolCount, inkOf, () => 0);

const oneTone: PresetNumbers = { fftSize: 64, subcarrierSpacingHz: [156250, 1], symbolCount: 4 };
const twoTones: PresetNumbers = { fftSize: 128, subcarrierSpacingHz: [125000, 1], symbolCount: 4 };
const manyTones: PresetNumbers = { fftSize: 256, subcarrierSpacingHz: [100000, 1], symbolCount: 4 };
const notched: PresetNumbers = { fftSize: 4096, subcarrierSpacingHz: [5000, 1], symbolCount: 1 };
const flat: PresetNumbers = { fftSize: 1024, subcarrierSpacingHz: [15000, 1], symbolCount: 14 };
const comb: PresetNumbers = { fftSize: 512, subcarrierSpacingHz: [30000, 1], symbolCount: 14 };

const goldPoints: Factor = { sequence: { kind: 'gold', cInit: 77, points: 'qpsk' }, counter: 'symbolCell', start: 0 };

export const benchPresets: readonly Preset[] = [
  benchPreset({
    presetId: 'bench-one-tone',
    title: 'One continuous tone',
    holds:
      'One tone an eighth of the clock above the carrier, 1.25 MHz at 10 MS/s: level, image, carrier leakage and side.',
    numbers: oneTone,
    content: () => ({
      prefixSamples: [0],
      tray: [nullInk, tone('Tone')],
      grid: alike(oneTone, (subcarrier) => (subcarrier === 8 ? 1 : 0)),
    }),
  }),
  benchPreset({
    presetId: 'bench-two-tones',
    title: 'Two tones, 1 MHz apart',
    holds:
      'Two equal tones 500 kHz below and above the carrier at 16 MS/s: third and fifth order products stand 1 MHz apart.',
    numbers: twoTones,
    content: () => ({
      prefixSamples: [0],
      tray: [nullInk, tone('Tones')],
      grid: alike(twoTones, (subcarrier) => (Math.abs(subcarrier) === 4 ? 1 : 0)),
    }),
  }),
  benchPreset({
    presetId: 'bench-64-tones',
    title: '64 tones, Newman phases',
    holds:
      '64 equal tones 100 kHz apart with a peak of 2.6 dB; the whole comb is moved by half a spacing, so that none stands on the carrier.',
    numbers: manyTones,
    content: () => ({
      prefixSamples: [0],
      frequencyOffsetHz: 50000,
      tray: [
        nullInk,
        tone('Tones, Newman', [{ sequence: { kind: 'newman', count: 64 }, counter: 'symbolCell', start: 0 }]),
      ],
      grid: alike(manyTones, (subcarrier) => (subcarrier >= -32 && subcarrier < 32 ? 1 : 0)),
    }),
  }),
  benchPreset({
    presetId: 'bench-notched-band',
    title: 'Notched band, noise-like',
    holds:
      '12 MHz of tones 5 kHz apart with phases of a Gold sequence, DC bare, and a notch of 1.2 MHz beside the carrier: what fills it was made by the device. One symbol, no prefix: the loop has no border, so the notch is as deep as the words allow.',
    numbers: notched,
    content: () => ({
      prefixSamples: [0],
      tray: [nullInk, tone('Noise-like tones', [goldPoints])],
      grid: alike(notched, (subcarrier) => {
        if (subcarrier === 0 || Math.abs(subcarrier) > 1200) return 0;
        return subcarrier > 300 && subcarrier <= 540 ? 0 : 1;
      }),
    }),
  }),
  benchPreset({
    presetId: 'bench-flat-64qam',
    title: 'Flat band, 64-QAM',
    holds:
      '600 data subcarriers 15 kHz apart, DC bare, no pilots, with a prefix of 72 of 1096 samples: flatness and EVM.',
    numbers: flat,
    content: () => ({
      prefixSamples: [72],
      tray: [nullInk, dataInk(1, 'Data, 64-QAM', '64qam', 'ts38211')],
      grid: alike(flat, (subcarrier) => (subcarrier !== 0 && Math.abs(subcarrier) <= 300 ? 1 : 0)),
    }),
  }),
  benchPreset({
    presetId: 'bench-comb-4',
    title: 'Comb, every fourth subcarrier',
    holds:
      '100 pilots on every fourth of 397 subcarriers, 30 kHz apart, none on the carrier, the same in every symbol: the channel on the teeth, noise and distortion between them.',
    numbers: comb,
    content: () => ({
      prefixSamples: [36],
      tray: [nullInk, pilotInk(1, 'Pilots, every fourth', [goldPoints])],
      grid: alike(comb, (subcarrier) => (Math.abs(subcarrier) <= 198 && (subcarrier + 198) % 4 === 0 ? 1 : 0)),
    }),
  }),
];
