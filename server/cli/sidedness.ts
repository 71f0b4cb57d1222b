import { sidednessOf } from '@/lib/document/sidedness';
import { refused, type Outcome } from './outcome.ts';
import { readProfile } from './readInputs.ts';
import { packDocument, type PackTarget } from './render.ts';

export interface SidednessCommand {
  bench: string;
  out: string | null;
  json: boolean;
}

/** sidedness bench.json [--out pack.zip]: one tone above the carrier in the profile's layout, and what to see of it. */
export async function sidedness(
  command: SidednessCommand,
  options: Pick<PackTarget, 'signal' | 'threads'>,
): Promise<Outcome> {
  const profile = await readProfile(command.bench);
  if (!profile.ok) return profile.outcome;
  const made = sidednessOf(profile.value);
  if (!made.ok) {
    const { pointer, message } = made.issue;
    return refused('limit_missed', `${command.bench} has no room for a sidedness pack.`, [
      { where: 'bench', pointer, message },
    ]);
  }
  const { document, words } = made.value;
  return packDocument(document, profile.value, { ...options, out: command.out, inputs: [command.bench] }, [words]);
}
