import { emptyDocument } from '@/lib/document/newDocument';
import type { Preset, PresetGroup, PresetNumbers } from '@/lib/document/presets/preset';
import { presets } from '@/lib/document/presets/presets';
import { parseFraction, parseInteger } from '@/lib/drawing/quantities';
import type { WaveformDocument } from '@/lib/synth';

/** What a new waveform can start from. */
export interface Start {
  startId: string;
  title: string;
  /** Standard and clauses, or what a bare grid or a file is. */
  source: string;
  leftOut: readonly string[];
  /** What a preset holds, and which of its numbers were compared with no text. */
  holds?: string;
  fromMemory?: string | null;
  document: WaveformDocument;
}

/** A start that a list can show before its document is built. */
export interface PresetStart extends Start {
  group: PresetGroup;
  numbers: PresetNumbers;
}

export const groupTitles: Record<PresetGroup, string> = {
  'Public standards': 'Public standards, each with its clause',
  'Bench basics': 'Bench basics, common practice',
};

export function presetStarts(): PresetStart[] {
  return presets.map((preset: Preset) => ({
    startId: preset.presetId,
    title: preset.title,
    source: preset.basedOn,
    leftOut: preset.leftOut,
    holds: preset.holds,
    fromMemory: preset.fromMemory,
    group: preset.group,
    numbers: preset.numbers,
    get document() {
      return preset.build();
    },
  }));
}

/** The blanks of "Grid of [2048] points, [15 kHz] apart, [14] symbols, prefix [144]", as typed. */
export interface BareGridText {
  fftSize: string;
  spacing: string;
  symbols: string;
  prefix: string;
}

export const bareGridDefaults: BareGridText = { fftSize: '2048', spacing: '15 kHz', symbols: '14', prefix: '144' };

const onlyTwoThreeFive = (size: number) => {
  for (const prime of [2, 3, 5]) while (size % prime === 0) size /= prime;
  return size === 1;
};

/** Reads the blanks; the message names the blank that is wrong and what it takes. */
export function bareGridStart(text: BareGridText): { ok: true; value: Start } | { ok: false; message: string } {
  const fftSize = parseInteger(text.fftSize);
  if (!fftSize.ok || fftSize.value < 16 || fftSize.value > 16384 || !onlyTwoThreeFive(fftSize.value))
    return { ok: false, message: 'Points: 16 to 16384, only factors 2, 3 and 5.' };
  const spacing = parseFraction(text.spacing, 'Hz');
  if (!spacing.ok) return { ok: false, message: `Spacing: ${spacing.message}` };
  if (spacing.value[0] / spacing.value[1] > 1e9) return { ok: false, message: 'Spacing: at most 1 GHz.' };
  const symbols = parseInteger(text.symbols);
  const symbolsMost = Math.min(16384, Math.floor(2 ** 23 / fftSize.value));
  if (!symbols.ok || symbols.value < 1 || symbols.value > symbolsMost)
    return { ok: false, message: `Symbols: 1 to ${symbolsMost} at ${fftSize.value} points.` };
  const prefix = parseInteger(text.prefix);
  if (!prefix.ok || prefix.value < 0 || prefix.value > fftSize.value)
    return { ok: false, message: `Prefix: 0 to ${fftSize.value}.` };
  const title = `Bare grid, ${fftSize.value} points`;
  return {
    ok: true,
    value: {
      startId: 'bare',
      title,
      source: 'A bare grid: nothing is painted yet',
      leftOut: [],
      document: emptyDocument({
        title,
        content: {
          fftSize: fftSize.value,
          subcarrierSpacingHz: [spacing.value[0], spacing.value[1]],
          symbolCount: symbols.value,
          prefixSamples: [prefix.value],
          tray: bareTray(),
        },
      }),
    },
  };
}

/** A bare grid's tray: enough to begin to paint. */
function bareTray(): WaveformDocument['content']['tray'] {
  return [
    { inkId: 'k0', name: 'Null', role: 'null', powerDb: 0, value: null },
    {
      inkId: 'k1',
      name: 'QPSK',
      role: 'data',
      powerDb: 0,
      value: { constellation: 'qpsk', bitMap: 'ts38211', streamId: 's0' },
    },
    {
      inkId: 'k2',
      name: '64-QAM',
      role: 'data',
      powerDb: 0,
      value: { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' },
    },
    {
      inkId: 'k3',
      name: 'Pilot',
      role: 'pilot',
      powerDb: 0,
      value: { factors: [{ sequence: { kind: 'gold', cInit: 1, points: 'qpsk' }, counter: 'subcarrier', start: 0 }] },
    },
    {
      inkId: 'k4',
      name: 'Tone',
      role: 'tone',
      powerDb: 0,
      value: { factors: [], phaseDeg: 0, continuous: true },
    },
  ];
}
