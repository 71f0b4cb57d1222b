import { parseArgs } from 'node:util';
import { number, Wrong, wordsOfWrong } from './optionValues.ts';

/** A way to a lower peak with its own options. Targets are in dB. */
export type LowerWay =
  | { method: 'phases'; law: 'newman' | 'schroeder' | null; targetDb: number | null }
  | {
      method: 'seed';
      /** Id or name of the payload; null: the first one with a seed that is painted. */
      payload: string | null;
      /** Null: the lowest seed. */
      first: number | null;
      /** Null: 100, or as many as there are. */
      count: number | null;
      targetDb: number | null;
    }
  | { method: 'reserve' | 'clip'; targetDb: number; passes: number };

export interface LowerCommand {
  name: 'lower';
  document: string;
  way: LowerWay;
  out: string;
  json: boolean;
}

export const lowerHelp = `  combwright lower <document.json> --method <way> --out <lowered.json>
      Lowers the waveform's peak, prints it before and after and writes the changed
      document. The ways and their options:
      phases   Newman's and Schroeder's phases on pilots and tones; --law newman|schroeder
               tries one of them only
      seed     the best of some payload seeds; --seeds <n> (100), --first <seed>,
               --payload <name>
      reserve  fills the reserved cells; --target <dB over the mean>, --passes <n> (40)
      clip     clips and filters the data cells; --target, --passes (4)
      With phases and seed a --target is the PAPR of the frame, where one is wanted.
      Ends with 1 where the target is missed (the best is written) or nothing better
      was found (nothing is written).
`;

const options = {
  method: { type: 'string' },
  out: { type: 'string' },
  target: { type: 'string' },
  passes: { type: 'string' },
  seeds: { type: 'string' },
  first: { type: 'string' },
  payload: { type: 'string' },
  law: { type: 'string' },
  json: { type: 'boolean' },
} as const;

const belongsTo = {
  passes: ['reserve', 'clip'],
  seeds: ['seed'],
  first: ['seed'],
  payload: ['seed'],
  law: ['phases'],
};

type Values = Partial<Record<keyof typeof options, string | boolean>> & Partial<Record<keyof typeof belongsTo, string>>;

/** Reads the options of lower (argv without node, script and --help). Null: another command. */
export function parseLowerCommand(
  argv: string[],
): { ok: true; command: LowerCommand } | { ok: false; message: string } | null {
  if (argv.find((part) => !part.startsWith('-')) !== 'lower') return null;
  try {
    return { ok: true, command: parseLower(argv) };
  } catch (error) {
    return { ok: false, message: wordsOfWrong(error) };
  }
}

function parseLower(argv: string[]): LowerCommand {
  const { values, positionals } = parseArgs({ args: argv, options, allowPositionals: true, strict: true });
  const [, document] = positionals;
  if (document === undefined || positionals.length > 2) throw new Wrong('lower takes one document');
  const { out } = values;
  if (out === undefined || out === '') throw new Wrong('lower needs --out with a file name');
  return { name: 'lower', document, way: wayOf(values), out, json: values.json ?? false };
}

function wayOf(values: Values & { method?: string; target?: string }): LowerWay {
  const { method, target, law, payload = null } = values;
  if (method !== 'phases' && method !== 'seed' && method !== 'reserve' && method !== 'clip')
    throw new Wrong('--method is phases, seed, reserve or clip');
  for (const [option, methods] of Object.entries(belongsTo))
    if (values[option as keyof typeof belongsTo] !== undefined && !methods.includes(method))
      throw new Wrong(`--${option} belongs to --method ${methods.join(' and ')}`);
  if (method === 'reserve' || method === 'clip') {
    if (target === undefined) throw new Wrong(`--method ${method} needs --target with dB over the mean`);
    const usual = method === 'reserve' ? 40 : 4;
    const passes = values.passes === undefined ? usual : number('passes', values.passes, 1, 1000, true);
    return { method, targetDb: number('target', target, 3, 20), passes };
  }
  const targetDb = target === undefined ? null : number('target', target, 0, 40);
  if (method === 'phases') {
    if (law !== undefined && law !== 'newman' && law !== 'schroeder') throw new Wrong('--law is newman or schroeder');
    return { method, law: law ?? null, targetDb };
  }
  const count = values.seeds === undefined ? null : number('seeds', values.seeds, 1, 10000, true);
  const first = values.first === undefined ? null : number('first', values.first, 0, 4294967295, true);
  return { method, payload, first, count, targetDb };
}
