import type { Ink } from '@/lib/synth/index';

/** The key of an ink's colours and mark in the theme's `cell` tokens. */
export type InkStyleKey =
  | 'null'
  | 'bpsk'
  | 'pi2bpsk'
  | 'qpsk'
  | 'qam16'
  | 'qam64'
  | 'qam256'
  | 'qam1024'
  | 'qam4096'
  | 'pilot'
  | 'tone'
  | 'reserved';

const DATA_STYLES = {
  bpsk: 'bpsk',
  'pi2-bpsk': 'pi2bpsk',
  qpsk: 'qpsk',
  '16qam': 'qam16',
  '64qam': 'qam64',
  '256qam': 'qam256',
  '1024qam': 'qam1024',
  '4096qam': 'qam4096',
} as const;

export function inkStyleOf(ink: Ink): InkStyleKey {
  return ink.role === 'data' ? DATA_STYLES[ink.value.constellation] : ink.role;
}

export type PriorityClass = 'tone' | 'pilot' | 'reserved' | 'data' | 'null';

/** Which ink a pixel takes that several cells share: the first of these. */
export const REDUCTION_PRIORITY: readonly PriorityClass[] = ['tone', 'pilot', 'reserved', 'data', 'null'];

/** 0 comes first. Within data, the ink with the higher number of the tray comes first, so the answer is one. */
export function priorityOf(style: InkStyleKey): number {
  const isNamed = style === 'tone' || style === 'pilot' || style === 'reserved' || style === 'null';
  return REDUCTION_PRIORITY.indexOf(isNamed ? style : 'data');
}

const MARKS = {
  null: 'bare',
  bpsk: 'dash',
  pi2bpsk: 'slant',
  qpsk: 'pips-1',
  qam16: 'pips-2',
  qam64: 'pips-3',
  qam256: 'pips-4',
  qam1024: 'pips-5',
  qam4096: 'pips-6',
  pilot: 'tooth',
  tone: 'ring',
  reserved: 'hatch',
} as const;

export type MarkName = (typeof MARKS)[InkStyleKey];

export function markOf(style: InkStyleKey): MarkName {
  return MARKS[style];
}

const CONSTELLATION_WORDS = {
  bpsk: 'BPSK',
  'pi2-bpsk': 'π/2-BPSK',
  qpsk: 'QPSK',
  '16qam': '16-QAM',
  '64qam': '64-QAM',
  '256qam': '256-QAM',
  '1024qam': '1024-QAM',
  '4096qam': '4096-QAM',
} as const;

const ROLE_WORDS = { null: 'null', pilot: 'pilot', tone: 'tone', reserved: 'reserved' } as const;

/** The trade word for what a cell of this ink carries: "256-QAM", "pilot". */
export function inkWord(ink: Ink): string {
  return ink.role === 'data' ? CONSTELLATION_WORDS[ink.value.constellation] : ROLE_WORDS[ink.role];
}
