import { parseArgs } from 'node:util';
import { noImpairments, type CaptureLayout, type ChannelSource, type ChannelTap, type Impairments } from '@/lib/synth';
import { number, Wrong, wordsOfWrong } from './optionValues.ts';

export interface ReceiveCommand {
  name: 'receive';
  capture: string;
  pack: string;
  /** Q's file, where I and Q stand in two. */
  q: string | null;
  clockHz: number | null;
  channel: ChannelSource;
  /** What is said about the words; the rest is guessed. */
  layout: Partial<CaptureLayout>;
  /** Packs of other editions to compare with where it is not recognised. */
  against: string[];
  mostSymbols: number | null;
  json: boolean;
}

export interface ImpairCommand {
  name: 'impair';
  pack: string;
  out: string;
  samples: number | null;
  layout: Pick<CaptureLayout, 'word' | 'bits' | 'align' | 'numberFormat' | 'byteOrder' | 'swapIq' | 'negateQ'>;
  impairments: Impairments;
  json: boolean;
}

export type CaptureCommand = ReceiveCommand | ImpairCommand;

export const captureHelp = `  combwright receive <capture> <pack.zip> [--clock <Hz>] [--channel all|pilots]
      Finds the pack's waveform in recorded I/Q and measures it: offset, delay,
      level, channel, EVM, null cells. The layout is guessed from the bytes or told:
      --word int8|int16|float32, --bits <n>, --left-aligned, --big-endian,
      --little-endian, --offset-binary, --swap-iq, --negate-q, --q <file for Q>.
      A SigMF pair says it itself.
      --against <other.zip>  which other pack it looks like, where it is not this one
      --symbols <n>          measures at most so many
  combwright impair <pack.zip> --out <capture.sigmf-data> [--seed <n>]
      Makes a test capture of the pack's vector: --snr <dB>, --offset <Hz>,
      --delay <samples>, --gain <dB>, --phase <degrees>, --tap <samples:dB:degrees>
      (several), --imbalance <dB:degrees>, --dc <I:Q>, --clip <dBFS>,
      --clock-ratio <p/q>, --clock-error <ppm>, --samples <n>, and the words above.
`;

const wordOptions = {
  word: { type: 'string' },
  bits: { type: 'string' },
  'left-aligned': { type: 'boolean' },
  'big-endian': { type: 'boolean' },
  'little-endian': { type: 'boolean' },
  'offset-binary': { type: 'boolean' },
  'swap-iq': { type: 'boolean' },
  'negate-q': { type: 'boolean' },
  json: { type: 'boolean' },
} as const;

const receiveOptions = {
  ...wordOptions,
  q: { type: 'string' },
  clock: { type: 'string' },
  channel: { type: 'string' },
  against: { type: 'string', multiple: true },
  symbols: { type: 'string' },
} as const;

const impairOptions = {
  ...wordOptions,
  out: { type: 'string' },
  samples: { type: 'string' },
  seed: { type: 'string' },
  snr: { type: 'string' },
  offset: { type: 'string' },
  delay: { type: 'string' },
  gain: { type: 'string' },
  phase: { type: 'string' },
  tap: { type: 'string', multiple: true },
  imbalance: { type: 'string' },
  dc: { type: 'string' },
  clip: { type: 'string' },
  'clock-ratio': { type: 'string' },
  'clock-error': { type: 'string' },
} as const;

function numbers(name: string, text: string, least: number, most: number, limit: number): number[] {
  const parts = text.split(':');
  if (parts.length < least || parts.length > most)
    throw new Wrong(`--${name} takes ${most} numbers with colons between`);
  return parts.map((part) => number(name, part, -limit, limit));
}

type WordValues = Record<'word' | 'bits', string | undefined> &
  Record<
    'left-aligned' | 'big-endian' | 'little-endian' | 'offset-binary' | 'swap-iq' | 'negate-q',
    boolean | undefined
  >;

function wordsOf(values: WordValues): Partial<CaptureLayout> {
  const { word, bits } = values;
  if (word !== undefined && word !== 'int8' && word !== 'int16' && word !== 'float32')
    throw new Wrong('--word is int8, int16 or float32');
  if (values['big-endian'] && values['little-endian'])
    throw new Wrong('--big-endian and --little-endian exclude each other');
  if (word === 'float32' && (bits !== undefined || values['left-aligned'] || values['offset-binary']))
    throw new Wrong('--bits, --left-aligned and --offset-binary belong to integers');
  if (word === 'int8' && ((bits !== undefined && bits !== '8') || values['left-aligned']))
    throw new Wrong('--word int8 has 8 bits and no alignment; fewer bits than a word has belong to int16');
  return {
    ...(word === undefined ? {} : { word, bits: word === 'int8' ? 8 : 16 }),
    ...(values.bits === undefined ? {} : { bits: number('bits', values.bits, 8, 16, true) }),
    ...(values['left-aligned'] ? { align: 'left' as const } : {}),
    ...(values['big-endian'] ? { byteOrder: 'big' as const } : {}),
    ...(values['little-endian'] ? { byteOrder: 'little' as const } : {}),
    ...(values['offset-binary'] ? { numberFormat: 'offsetBinary' as const } : {}),
    ...(values['swap-iq'] ? { swapIq: true } : {}),
    ...(values['negate-q'] ? { negateQ: true } : {}),
  };
}

/** Reads the options of receive and impair (argv without node, script and --help). Null: another command. */
export function parseCaptureCommand(
  argv: string[],
): { ok: true; command: CaptureCommand } | { ok: false; message: string } | null {
  const name = argv.find((part) => !part.startsWith('-'));
  if (name !== 'receive' && name !== 'impair') return null;
  const joined = joinNegatives(argv);
  try {
    return { ok: true, command: name === 'receive' ? parseReceive(joined) : parseImpair(joined) };
  } catch (error) {
    return { ok: false, message: wordsOfWrong(error) };
  }
}

/** "--gain -17.2" as "--gain=-17.2": a number below zero is no option. */
function joinNegatives(argv: string[]): string[] {
  const joined: string[] = [];
  for (const part of argv) {
    const last = joined[joined.length - 1];
    if (/^-[\d.]/.test(part) && last !== undefined && /^--[a-z-]+$/.test(last))
      joined[joined.length - 1] = `${last}=${part}`;
    else joined.push(part);
  }
  return joined;
}

function parseReceive(argv: string[]): ReceiveCommand {
  const { values, positionals } = parseArgs({
    args: argv,
    options: receiveOptions,
    allowPositionals: true,
    strict: true,
  });
  const [, capture, pack] = positionals;
  if (capture === undefined || pack === undefined || positionals.length > 3)
    throw new Wrong('receive takes a capture and a pack');
  if (values.channel !== undefined && values.channel !== 'all' && values.channel !== 'pilots')
    throw new Wrong('--channel is all or pilots');
  return {
    name: 'receive',
    capture,
    pack,
    q: values.q ?? null,
    clockHz: values.clock === undefined ? null : number('clock', values.clock, 1e-6, 1e13),
    channel: values.channel === 'pilots' ? 'pilots' : 'allKnown',
    layout: wordsOf(values as WordValues),
    against: values.against ?? [],
    mostSymbols: values.symbols === undefined ? null : number('symbols', values.symbols, 1, 1e7, true),
    json: values.json ?? false,
  };
}

function parseImpair(argv: string[]): ImpairCommand {
  const { values, positionals } = parseArgs({
    args: argv,
    options: impairOptions,
    allowPositionals: true,
    strict: true,
  });
  const [, pack] = positionals;
  if (pack === undefined || positionals.length > 2) throw new Wrong('impair takes one pack');
  if (values.out === undefined || values.out === '') throw new Wrong('impair needs --out with a file name');
  const one = (
    option: 'snr' | 'offset' | 'delay' | 'gain' | 'phase' | 'clip' | 'clock-error',
    limit: number,
  ): number => (values[option] === undefined ? 0 : number(option, values[option], -limit, limit));
  const taps = (values.tap ?? []).map((text): ChannelTap => {
    const [delaySamples = 0, gainDb = 0, phaseDeg = 0] = numbers('tap', text, 1, 3, 1e6);
    if (delaySamples < 0) throw new Wrong('--tap begins with a delay of 0 samples or more');
    return { delaySamples, gainDb, phaseDeg };
  });
  const ratio = /^(\d+)\/(\d+)$/.exec(values['clock-ratio'] ?? '1/1');
  const [p, q] = [Number(ratio?.[1]), Number(ratio?.[2])];
  if (!(p >= 1 && p <= 64 && q >= 1 && q <= 64)) throw new Wrong('--clock-ratio is p/q, both from 1 to 64');
  const [imbalanceDb = 0, imbalanceDeg = 0] = numbers('imbalance', values.imbalance ?? '0', 1, 2, 60);
  const [dcI = 0, dcQ = 0] = numbers('dc', values.dc ?? '0', 1, 2, 1);
  const words = wordsOf(values as WordValues);
  return {
    name: 'impair',
    pack,
    out: values.out,
    samples: values.samples === undefined ? null : number('samples', values.samples, 1, 536870912, true),
    layout: {
      word: words.word ?? 'int16',
      bits: words.bits ?? 16,
      align: words.align ?? 'right',
      numberFormat: words.numberFormat ?? 'twosComplement',
      byteOrder: words.byteOrder ?? 'little',
      swapIq: words.swapIq ?? false,
      negateQ: words.negateQ ?? false,
    },
    impairments: {
      ...noImpairments,
      seed: values.seed === undefined ? 1 : number('seed', values.seed, 0, 4294967295, true),
      taps,
      clockRatio: [p, q],
      clockErrorPpm: one('clock-error', 1000),
      delaySamples: one('delay', 1e9),
      frequencyOffsetHz: one('offset', 1e12),
      gainDb: one('gain', 200),
      phaseDeg: one('phase', 1e6),
      imbalanceDb,
      imbalanceDeg,
      dcI,
      dcQ,
      snrDb: values.snr === undefined ? null : one('snr', 200),
      clipDbfs: values.clip === undefined ? null : one('clip', 200),
    },
    json: values.json ?? false,
  };
}
