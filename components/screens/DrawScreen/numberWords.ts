import {
  formatFraction,
  formatInteger,
  formatNumber,
  formatQuantity,
  parseFraction,
  parseInteger,
  parseQuantity,
  type Parsed,
  type QuantityText,
} from '@/lib/drawing/quantities';
import type { SettingsChange } from '@/lib/editor/commands/settings';
import { nearestFftSizes, stepFftSize } from '@/lib/editor/fftSizes';
import type { Settings } from '@/lib/editor/types';
import type { NumberId } from './sheets';

/** One word of the numbers strip: how it reads, what its field takes, where its arrows lead. */
export interface NumberWord {
  id: NumberId;
  name: string;
  /** The fixed unit behind the field. */
  unit: string;
  /** Units to press on a phone, as factors of what is typed. */
  units?: readonly string[];
  limits: (settings: Settings) => string;
  /** As the strip shows it. */
  read: (settings: Settings) => QuantityText;
  /** As the field shows it, in the field's own unit. */
  text: (settings: Settings) => string;
  parse: (text: string, settings: Settings) => Parsed<SettingsChange>;
  step?: (settings: Settings, steps: number) => SettingsChange;
  /** Legal values round what is typed, as buttons. */
  nearest?: (text: string) => string[];
  /** The field takes letters: lists and fractions. */
  takesWords?: boolean;
}

const whole =
  <K extends keyof Settings>(key: K) =>
  (text: string): Parsed<SettingsChange> => {
    const parsed = parseInteger(text);
    return parsed.ok ? { ok: true, value: { [key]: parsed.value } } : parsed;
  };

const timing =
  (key: 'repeats' | 'gapSamples' | 'padSamples') =>
  (text: string, settings: Settings): Parsed<SettingsChange> => {
    const parsed = parseInteger(text);
    return parsed.ok ? { ok: true, value: { timing: { ...settings.timing, [key]: parsed.value } } } : parsed;
  };

const within = (value: number, least: number, most: number) => Math.max(least, Math.min(most, value));

/** "160, 144 × 6": equal neighbours are counted. */
export function prefixText(samples: readonly number[]): string {
  const parts: string[] = [];
  for (let i = 0; i < samples.length;) {
    let next = i + 1;
    while (next < samples.length && samples[next] === samples[i]) next++;
    parts.push(next - i > 1 ? `${samples[i]} × ${next - i}` : String(samples[i]));
    i = next;
  }
  return parts.join(', ');
}

/** Reads "160, 144 × 6" (x and * count too) back to the list. */
export function parsePrefix(text: string, most: number): Parsed<number[]> {
  const list: number[] = [];
  for (const part of text.split(/[,;]/)) {
    const match = /^\s*(\d+)\s*(?:[×xX*]\s*(\d+))?\s*$/.exec(part);
    if (!match) return { ok: false, message: 'Lengths in samples, as in 160, 144 × 6.' };
    const times = Number(match[2] ?? 1);
    if (times < 1 || list.length + times > most)
      return { ok: false, message: `There are ${formatInteger(most)} symbols: at most one length each.` };
    for (let i = 0; i < times; i++) list.push(Number(match[1]));
  }
  return { ok: true, value: list };
}

export const numberWords: readonly NumberWord[] = [
  {
    id: 'fftSize',
    name: 'FFT size',
    unit: 'points',
    limits: () => '16 to 16384, only factors 2, 3 and 5',
    read: (s) => ({ value: String(s.fftSize), unit: '' }),
    text: (s) => String(s.fftSize),
    parse: whole('fftSize'),
    step: (s, steps) => ({ fftSize: stepFftSize(s.fftSize, steps) }),
    nearest: (text) => {
      const parsed = parseInteger(text);
      return parsed.ok ? nearestFftSizes(parsed.value).map(String) : [];
    },
  },
  {
    id: 'spacing',
    name: 'Spacing',
    unit: 'Hz',
    units: ['Hz', 'kHz', 'MHz'],
    limits: () => 'above 0, at most 1 GHz; exact, also as a fraction: 3125000/7',
    read: (s) => formatFraction(s.subcarrierSpacingHz),
    text: (s) => fractionText(s.subcarrierSpacingHz),
    parse: (text) => {
      const parsed = parseFraction(text);
      return parsed.ok ? { ok: true, value: { subcarrierSpacingHz: parsed.value } } : parsed;
    },
    takesWords: true,
  },
  {
    id: 'symbols',
    name: 'Symbols',
    unit: '',
    limits: (s) => `1 to ${formatInteger(Math.min(16384, Math.floor(2 ** 23 / s.fftSize)))}`,
    read: (s) => ({ value: formatInteger(s.symbolCount), unit: '' }),
    text: (s) => String(s.symbolCount),
    parse: whole('symbolCount'),
    step: (s, steps) => ({
      symbolCount: within(s.symbolCount + steps, 1, Math.min(16384, Math.floor(2 ** 23 / s.fftSize))),
    }),
  },
  {
    id: 'prefix',
    name: 'Prefix',
    unit: 'samples',
    limits: (s) => `0 to ${formatInteger(s.fftSize)} each, used in turn: 160, 144 × 6`,
    read: (s) => ({ value: prefixText(s.prefixSamples), unit: '' }),
    text: (s) => prefixText(s.prefixSamples),
    parse: (text, s) => {
      const parsed = parsePrefix(text, s.symbolCount);
      return parsed.ok ? { ok: true, value: { prefixSamples: parsed.value } } : parsed;
    },
    takesWords: true,
  },
  {
    id: 'overlap',
    name: 'Overlap',
    unit: 'samples',
    limits: (s) => `0 to ${formatInteger(Math.min(...s.prefixSamples))}, the shortest prefix`,
    read: (s) => ({ value: formatInteger(s.overlapSamples), unit: '' }),
    text: (s) => String(s.overlapSamples),
    parse: whole('overlapSamples'),
    step: (s, steps) => ({ overlapSamples: within(s.overlapSamples + steps, 0, Math.min(...s.prefixSamples)) }),
  },
  {
    id: 'oversampling',
    name: 'Oversampling',
    unit: 'times',
    limits: () => '1 to 16',
    read: (s) => ({ value: `× ${s.oversampling}`, unit: '' }),
    text: (s) => String(s.oversampling),
    parse: whole('oversampling'),
    step: (s, steps) => ({ oversampling: within(s.oversampling + steps, 1, 16) }),
    nearest: () => ['1', '2', '4', '8', '16'],
  },
  {
    id: 'offset',
    name: 'Offset',
    unit: 'Hz',
    units: ['Hz', 'kHz', 'MHz'],
    limits: (s) => {
      const halfHz = (s.fftSize * s.oversampling * s.subcarrierSpacingHz[0]) / s.subcarrierSpacingHz[1] / 2;
      const { value, unit } = formatQuantity(halfHz, 'Hz');
      return `at most ${value} ${unit} either way, half the sample clock`;
    },
    read: (s) => formatQuantity(s.frequencyOffsetHz, 'Hz', 12),
    text: (s) => plain(s.frequencyOffsetHz),
    parse: (text) => {
      const parsed = parseQuantity(text, 'Hz');
      return parsed.ok ? { ok: true, value: { frequencyOffsetHz: parsed.value } } : parsed;
    },
  },
  {
    id: 'mode',
    name: 'Mode',
    unit: '',
    limits: () => 'loop: the file plays without an end; burst: once, with its last ramp',
    read: (s) => ({ value: s.timing.mode, unit: '' }),
    text: (s) => s.timing.mode,
    parse: (text, s) =>
      text === 'loop' || text === 'burst'
        ? { ok: true, value: { timing: { ...s.timing, mode: text } } }
        : { ok: false, message: 'loop or burst' },
  },
  {
    id: 'gap',
    name: 'Idle gap',
    unit: 'samples',
    limits: () => '0 to 2 147 483 647, after each repeat',
    read: (s) => ({ value: formatInteger(s.timing.gapSamples), unit: '' }),
    text: (s) => String(s.timing.gapSamples),
    parse: timing('gapSamples'),
    step: (s, steps) => ({ timing: { ...s.timing, gapSamples: Math.max(0, s.timing.gapSamples + steps) } }),
  },
  {
    id: 'repeats',
    name: 'Repeats',
    unit: 'times',
    limits: () => '1 to 65536',
    read: (s) => ({ value: formatInteger(s.timing.repeats), unit: '' }),
    text: (s) => String(s.timing.repeats),
    parse: timing('repeats'),
    step: (s, steps) => ({ timing: { ...s.timing, repeats: within(s.timing.repeats + steps, 1, 65536) } }),
  },
  {
    id: 'pad',
    name: 'Pad',
    unit: 'samples',
    limits: () => '0 to 2 147 483 647, once at the end of the file',
    read: (s) => ({ value: formatInteger(s.timing.padSamples), unit: '' }),
    text: (s) => String(s.timing.padSamples),
    parse: timing('padSamples'),
    step: (s, steps) => ({ timing: { ...s.timing, padSamples: Math.max(0, s.timing.padSamples + steps) } }),
  },
];

export function numberWord(id: NumberId): NumberWord {
  return numberWords.find((word) => word.id === id)!;
}

/** Exact, in whole hertz or as a fraction. */
function fractionText([numerator, denominator]: readonly [number, number]): string {
  return denominator === 1 ? String(numerator) : `${numerator}/${denominator}`;
}

/** A number as it is typed: no grouping, a real minus. */
function plain(value: number): string {
  return value < 0 ? `−${-value}` : String(value);
}

/** What a field of dB or dBm shows. */
export function decibels(value: number): string {
  return formatNumber(value, 3);
}
