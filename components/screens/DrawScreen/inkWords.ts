import { inkWord } from '@/lib/drawing/inkStyle';
import { formatNumber } from '@/lib/drawing/quantities';
import type { Factor, Ink, Sequence, Stream, PayloadSource } from '@/lib/synth';

const SEQUENCE_NAMES: Record<Sequence['kind'], string> = {
  constant: 'Constant',
  alternating: 'Alternating',
  pn: 'Noise',
  gold: 'Gold',
  zadoffChu: 'Zadoff–Chu',
  newman: 'Newman',
  schroeder: 'Schroeder',
  listed: 'Listed',
};

export function sequenceName(sequence: Sequence): string {
  return SEQUENCE_NAMES[sequence.kind];
}

/** "+3 dB", "0 dB". */
export function powerText(powerDb: number): string {
  return `${powerDb > 0 ? '+' : ''}${formatNumber(powerDb, 2)} dB`;
}

/** What stands under an ink's name in the tray: its power, or where its value comes from. */
export function inkSource(ink: Ink): string {
  if (ink.role === 'null') return 'bare';
  if (ink.role === 'reserved') return 'free';
  if (ink.powerDb !== 0 || ink.role === 'data') return powerText(ink.powerDb);
  const first = ink.value.factors[0];
  return first ? sequenceName(first.sequence) : 'sine';
}

/** An ink in words: "Pilot, pilot, Gold"; its name alone where that says it. */
export function inkSpoken(ink: Ink): string {
  const word = inkWord(ink);
  return [ink.name, ...(ink.name.toLowerCase() === word.toLowerCase() ? [] : [word]), inkSource(ink)].join(', ');
}

interface NamedRegister {
  name: string;
  stages: number;
  taps: number[];
  inverted: boolean;
}

/** ITU-T O.150's registers, by name. */
export const NAMED_REGISTERS: readonly NamedRegister[] = [
  { name: 'PN9', stages: 9, taps: [5, 9], inverted: false },
  { name: 'PN11', stages: 11, taps: [9, 11], inverted: false },
  { name: 'PN15', stages: 15, taps: [14, 15], inverted: true },
  { name: 'PN20', stages: 20, taps: [3, 20], inverted: false },
  { name: 'PN23', stages: 23, taps: [18, 23], inverted: true },
];

export function registerName(source: { stages: number; taps: readonly number[]; inverted: boolean }): string {
  const known = NAMED_REGISTERS.find(
    (one) => one.stages === source.stages && one.taps.join() === source.taps.join() && one.inverted === source.inverted,
  );
  return known?.name ?? `PN${source.stages}`;
}

function sourceName(source: PayloadSource): string {
  switch (source.kind) {
    case 'pn':
      return registerName(source);
    case 'gold':
      return 'Gold';
    case 'zeros':
      return 'zeros';
    case 'ones':
      return 'ones';
    case 'pattern':
      return source.bits.length > 8 ? `pattern of ${source.bits.length}` : source.bits;
    case 'uploaded':
      return source.name;
  }
}

/** "PN15, running". */
export function streamText(stream: Stream): string {
  return `${sourceName(stream.source)}, ${stream.fill}`;
}

const COUNTER_WORDS: Record<Factor['counter'], string> = {
  cell: 'cell',
  symbolCell: 'cell of its symbol',
  subcarrier: 'subcarrier',
  symbol: 'symbol',
};

export function counterWord(counter: Factor['counter']): string {
  return COUNTER_WORDS[counter];
}
