import type { Fraction, WaveformContent, WaveformDocument } from '@/lib/synth/index';
import { emptyDocument } from '../newDocument';

export const presetGroups = ['Public standards', 'Bench basics'] as const;
export type PresetGroup = (typeof presetGroups)[number];

/** What a list says of a layout before it is built. */
export interface PresetNumbers {
  fftSize: number;
  subcarrierSpacingHz: Fraction;
  symbolCount: number;
}

/** A built-in starting layout, made from the numbers of a public standard or of common practice. */
export interface Preset {
  presetId: string;
  group: PresetGroup;
  title: string;
  /** Standard and clauses, as `about.basedOn` keeps it; of a bench basic that there is no source. */
  basedOn: string;
  /** What of the clause the layout holds, in one sentence. */
  holds: string;
  /** What a real signal of the standard has and this layout has not; nothing for a bench basic. */
  leftOut: readonly string[];
  /** The numbers that were recalled and not compared with the standard's text or a second source; null: none. */
  fromMemory: string | null;
  numbers: PresetNumbers;
  /** Made at the first call and kept: everybody gets the same object, so nobody changes it. */
  build: () => WaveformDocument;
}

interface PresetPlan extends Omit<Preset, 'group' | 'build'> {
  /** Said in the notes before what is left out. */
  remark?: string;
  content: () => Omit<Partial<WaveformContent>, keyof PresetNumbers>;
}

function presetOf(group: PresetGroup, { content, remark, ...shown }: PresetPlan): Preset {
  let built: WaveformDocument | null = null;
  const notes = [
    shown.holds,
    remark,
    shown.leftOut.length > 0 ? `Left out: ${shown.leftOut.join('; ')}.` : undefined,
    shown.fromMemory === null ? undefined : `From memory, not compared with the text: ${shown.fromMemory}.`,
  ];
  return {
    ...shown,
    group,
    build: () =>
      (built ??= emptyDocument({
        title: shown.title,
        basedOn: group === 'Public standards' ? shown.basedOn : null,
        notes: notes.filter((part) => part !== undefined).join(' '),
        content: { ...shown.numbers, oversampling: 1, ...content() },
      })),
  };
}

export const standardPreset = (plan: PresetPlan): Preset => presetOf('Public standards', plan);

export const benchPreset = (plan: Omit<PresetPlan, 'basedOn' | 'leftOut' | 'fromMemory'>): Preset =>
  presetOf('Bench basics', { ...plan, basedOn: 'Common practice, no source', leftOut: [], fromMemory: null });
