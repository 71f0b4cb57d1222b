import { parseArgs } from 'node:util';
import { captureHelp, parseCaptureCommand, type CaptureCommand } from './captureArguments.ts';
import { lowerHelp, parseLowerCommand, type LowerCommand } from './lowerArguments.ts';
import { wordsOfWrong } from './optionValues.ts';

export type Command =
  | { name: 'help' }
  | { name: 'version' }
  | { name: 'render'; document: string; bench: string; out: string | null; json: boolean }
  | { name: 'sidedness'; bench: string; out: string | null; json: boolean }
  | { name: 'verify'; pack: string; json: boolean }
  | { name: 'inspect'; document: string; json: boolean }
  | { name: 'fit'; document: string; bench: string; out: string | null; json: boolean }
  | LowerCommand
  | CaptureCommand;

export type Parsed = { ok: true; command: Command } | { ok: false; message: string; json: boolean };

export const helpText = `combwright: from a waveform document to a proven vector

  combwright render <document.json> <bench.json> [--out <pack.zip>]
      Renders the document for the bench profile, reads the finished file back,
      proves it and writes the pack (a draft). Without --out the pack gets its own
      name in the current folder.
  combwright sidedness <bench.json> [--out <pack.zip>]
      Writes one tone above the carrier in the profile's layout: where an analyser
      shows it below, the profile's I and Q are not the generator's.
  combwright verify <pack.zip>
      Reads a pack again: every digest, and every word against a new synthesis.
  combwright inspect <document.json>
      Prints the document's figures and digests.
  combwright fit <document.json> <bench.json> [--out <mended.json>]
      Checks the document against every limit of the bench profile, with what would
      mend each miss and what that costs. With --out the first remedies are applied
      and the mended document is written. Ends with 1 where a pack would be refused.
${lowerHelp}${captureHelp}
  --json      one JSON object on standard output instead of lines
  --help      this text
  --version   the program's and its arithmetic's version

  Exit code: 0 done, 1 refused or failed (the reason on standard error, with the
  place in the document), 2 the command line itself is wrong.
`;

const options = {
  out: { type: 'string' },
  json: { type: 'boolean' },
  help: { type: 'boolean', short: 'h' },
  version: { type: 'boolean' },
} as const;

/** Reads the command line (without node and script). Unknown options and a wrong count of files are usage errors. */
export function parseCommand(argv: string[]): Parsed {
  const json = argv.includes('--json');
  const wrong = (message: string): Parsed => ({ ok: false, message, json });
  const isHelp = argv.includes('--help') || argv.includes('-h');
  const own = isHelp ? null : (parseCaptureCommand(argv) ?? parseLowerCommand(argv));
  if (own !== null) return own.ok ? own : wrong(own.message);
  let values: { out?: string; json?: boolean; help?: boolean; version?: boolean };
  let positionals: string[];
  try {
    ({ values, positionals } = parseArgs({ args: argv, options, allowPositionals: true, strict: true }));
  } catch (error) {
    return wrong(wordsOfWrong(error));
  }
  if (values.help) return { ok: true, command: { name: 'help' } };
  if (values.version) return { ok: true, command: { name: 'version' } };
  const [name, ...files] = positionals;
  if (name === undefined)
    return wrong('A command is missing: render, sidedness, verify, inspect, fit, lower, receive or impair');
  if (!['render', 'sidedness', 'fit'].includes(name) && values.out !== undefined)
    return wrong('--out belongs to render, sidedness and fit');
  switch (name) {
    case 'render':
    case 'fit': {
      const [document, bench] = files;
      if (document === undefined || bench === undefined || files.length > 2)
        return wrong(`${name} takes a document and a bench profile`);
      if (values.out === '') return wrong('--out needs a file name');
      return { ok: true, command: { name, document, bench, out: values.out ?? null, json } };
    }
    case 'sidedness': {
      const [bench] = files;
      if (bench === undefined || files.length > 1) return wrong('sidedness takes one bench profile');
      if (values.out === '') return wrong('--out needs a file name');
      return { ok: true, command: { name, bench, out: values.out ?? null, json } };
    }
    case 'verify': {
      const [pack] = files;
      if (pack === undefined || files.length > 1) return wrong('verify takes one pack');
      return { ok: true, command: { name, pack, json } };
    }
    case 'inspect': {
      const [document] = files;
      if (document === undefined || files.length > 1) return wrong('inspect takes one document');
      return { ok: true, command: { name, document, json } };
    }
    default:
      return wrong(`There is no command "${name.slice(0, 40)}"`);
  }
}
