import type { WaveformDocument } from '@/lib/synth/index';
import { emptyDocument } from '../newDocument';
import { paintedGrid } from '../paintedGrid';
import { data, factor, pn9, streams, tray } from './parts';

/** Continuous tones: two sines 1 MHz apart that run on through prefixes and repeats, for third-order products. */
export function twoTones(): WaveformDocument {
  return emptyDocument({
    title: 'Example: two tones 1 MHz apart',
    notes: 'Invented. Continuous tones, level set by the peak of the components.',
    content: {
      fftSize: 100,
      subcarrierSpacingHz: [100000, 1],
      symbolCount: 4,
      prefixSamples: [0],
      oversampling: 4,
      tray: tray({ name: 'Tone', role: 'tone', powerDb: 0, value: { factors: [], phaseDeg: 0, continuous: true } }),
      grid: paintedGrid(100, 4, (subcarrier) => (Math.abs(subcarrier) === 5 ? 1 : 0)),
      streams: [],
      level: { reference: 'componentPeak', headroomDb: 1 },
    },
  });
}

/** Multitones whose phases keep the peak low, a notch, and reserved cells in it. */
export function phasedMultitone(): WaveformDocument {
  const inkOf = (subcarrier: number, symbol: number): number => {
    if (subcarrier === 0 || Math.abs(subcarrier) > 48) return 0;
    if (Math.abs(subcarrier) < 8) return 3;
    return symbol === 0 ? 1 : 2;
  };
  const tone = (name: string, kind: 'newman' | 'schroeder') => ({
    name,
    role: 'tone' as const,
    powerDb: 0,
    value: { factors: [factor({ kind, count: 82 })], phaseDeg: 0, continuous: false },
  });
  return emptyDocument({
    title: 'Example: multitone with Newman and Schroeder phases',
    notes: 'Invented. Symbol 0 has Newman’s phases, symbol 1 Schroeder’s; the notch round DC is reserved.',
    content: {
      fftSize: 128,
      subcarrierSpacingHz: [240000, 1],
      symbolCount: 2,
      prefixSamples: [32],
      overlapSamples: 8,
      oversampling: 4,
      tray: tray(tone('Newman tones', 'newman'), tone('Schroeder tones', 'schroeder'), {
        name: 'Notch, reserved',
        role: 'reserved',
        powerDb: 0,
        value: null,
      }),
      grid: paintedGrid(128, 2, inkOf),
      streams: [],
    },
  });
}

/** Numbers off the beaten track: a transform of 2·3·5 factors, an exact fraction, a prefix list, offset and repeats. */
export function oddNumbers(): WaveformDocument {
  return emptyDocument({
    title: 'Example: exact fraction, prefix list, frequency offset',
    notes: 'Invented. The offset turns a whole number of times in the file, so the loop closes; the payload runs on.',
    content: {
      fftSize: 90,
      subcarrierSpacingHz: [3125000, 7],
      symbolCount: 6,
      prefixSamples: [15, 10, 10],
      overlapSamples: 5,
      oversampling: 2,
      frequencyOffsetHz: -1562500,
      timing: { mode: 'loop', repeats: 18, gapSamples: 0, padSamples: 0 },
      tray: tray(
        data('Uploaded bits', { constellation: 'qpsk', bitMap: 'en300744', streamId: 's0' }, 3),
        data('Pattern', { constellation: 'pi2-bpsk', bitMap: 'ts38211', streamId: 's1' }, -6),
        data('Anchored', { constellation: '256qam', bitMap: 'ieee80211', streamId: 's2' }),
      ),
      grid: paintedGrid(90, 6, (subcarrier, symbol) => {
        if (subcarrier === 0 || Math.abs(subcarrier) > 36) return 0;
        return 1 + (((Math.floor((subcarrier + 36) / 24) % 3) + symbol) % 3);
      }),
      streams: streams(
        {
          name: 'Thirteen uploaded bits',
          source: { kind: 'uploaded', name: 'barker13.bin', bitCount: 13, base64: '+ag=' },
          fill: 'running',
          acrossRepeats: 'continue',
        },
        { name: 'Pattern', source: { kind: 'pattern', bits: '0110' }, fill: 'running', acrossRepeats: 'restart' },
        { name: 'Noise', source: pn9, fill: 'anchored', acrossRepeats: 'continue' },
      ),
    },
  });
}
