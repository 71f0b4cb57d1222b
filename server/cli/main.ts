import path from 'node:path';
import { readRenderWorkers, StartRefused } from '../config.ts';
import { defaultThreadCount, type WorkThreads } from '../packs/pool/workPool.ts';
import { loadSampleEngine } from '../sampleEngine.ts';
import { helpText, parseCommand, type Command } from './arguments.ts';
import { impair } from './impair.ts';
import { fit } from './fit.ts';
import { inspect } from './inspect.ts';
import { lower } from './lower.ts';
import { done, refused, usage, type Outcome } from './outcome.ts';
import { receive } from './receive.ts';
import { render } from './render.ts';
import { sidedness } from './sidedness.ts';
import { verify } from './verify.ts';
import { versionLine } from './version.ts';

/** A cancel (Ctrl-C, TERM) lets the pack's makers remove what they have begun; a second one ends at once. */
function cancelSignal(): AbortSignal {
  const controller = new AbortController();
  const stop = () => {
    if (controller.signal.aborted) process.exit(130);
    controller.abort();
  };
  process.on('SIGINT', stop);
  process.on('SIGTERM', stop);
  return controller.signal;
}

/** Of the pool that renders long packs, beside this bundle. */
function threads(): WorkThreads {
  const file = path.join(import.meta.dirname, 'work.worker.mjs');
  return { file, count: readRenderWorkers(process.env) ?? defaultThreadCount() };
}

async function run(command: Command): Promise<Outcome> {
  switch (command.name) {
    case 'help':
      return done(helpText.trimEnd().split('\n'), {});
    case 'version':
      return done([versionLine], { version: versionLine });
    case 'render':
      return render(command, { signal: cancelSignal(), threads: threads() });
    case 'sidedness':
      return sidedness(command, { signal: cancelSignal(), threads: threads() });
    case 'verify':
      return verify(command, { signal: cancelSignal(), threads: threads() });
    case 'inspect':
      return inspect(command);
    case 'fit':
      return fit(command);
    case 'lower':
      return lower(command, cancelSignal());
    case 'receive':
      return receive(command, cancelSignal());
    case 'impair':
      return impair(command, cancelSignal());
  }
}

/** Whatever fails unexpectedly is one sentence on standard error: nobody at a bench reads a stack. */
async function outcomeOf(argv: string[]): Promise<Outcome> {
  const parsed = parseCommand(argv);
  if (!parsed.ok) return usage(parsed.message);
  try {
    return await run(parsed.command);
  } catch (error) {
    if (error instanceof StartRefused) return refused('invalid', error.message);
    const words = error instanceof Error ? error.message.split('\n')[0] : String(error);
    return refused('internal', `The program failed: ${words}`);
  }
}

loadSampleEngine(path.resolve(import.meta.dirname, '..', 'public', 'wasm', 'engine.wasm')); // beside build/
const argv = process.argv.slice(2);
const outcome = await outcomeOf(argv);
// A reader that closes early (head) is no failure of ours.
process.stdout.on('error', () => undefined);
if (outcome.errors.length > 0) process.stderr.write(`${outcome.errors.join('\n')}\n`);
const output = argv.includes('--json') ? JSON.stringify(outcome.json, null, 2) : outcome.lines.join('\n');
if (output !== '') process.stdout.write(`${output}\n`);
process.exitCode = outcome.exitCode;
