import { writeFile } from 'node:fs/promises';
import path from 'node:path';
import { applyChanges, type BenchProfile, type FitFinding, type WaveformDocument } from '@/lib/synth';
import { measureContent } from '../figures/measure.ts';
import { fitOf } from '../fit/fitOf.ts';
import { done, refused, type Outcome } from './outcome.ts';
import { readDocument, readProfile, reasonOf } from './readInputs.ts';

export interface FitCommand {
  document: string;
  bench: string;
  /** Where the document goes with the first remedy of each miss applied. */
  out: string | null;
  json: boolean;
}

/** More remedies than there are checks with one would go round in circles. */
const ROUNDS_MOST = 13;

const verdicts = { meets: 'meets', misses: 'misses', cannotJudge: 'cannot be judged' } as const;

function linesOf(finding: FitFinding): string[] {
  const short = finding.verdict === 'misses' ? finding.byHowMuch : finding.found;
  const head = `${finding.title.padEnd(20)} ${verdicts[finding.verdict].padEnd(17)} ${short}`;
  const offers = finding.remedies.map(({ label, cost }) => `  * ${label}. ${cost}`);
  return finding.verdict === 'meets' ? [head, ...offers] : [head, `  ${finding.words}`, ...offers];
}

const judged = (document: WaveformDocument, profile: BenchProfile): FitFinding[] =>
  fitOf(document, profile, measureContent(document.content).levels);

const firstRemedy = (findings: FitFinding[]) =>
  findings.find(({ verdict, remedies }) => verdict === 'misses' && remedies.length > 0)?.remedies[0];

/** fit document.json bench.json [--out mended.json]: every check against the profile, measured, with what would mend it. */
export async function fit(command: FitCommand): Promise<Outcome> {
  const read = await readDocument(command.document);
  if (!read.ok) return read.outcome;
  const profile = await readProfile(command.bench);
  if (!profile.ok) return profile.outcome;
  let document = read.value;
  let findings = judged(document, profile.value);
  const mended: string[] = [];
  const { out } = command;
  if (out !== null) {
    if ([command.document, command.bench].some((input) => path.resolve(input) === path.resolve(out)))
      return refused('invalid', `${out} is one of the inputs; nothing was written.`);
    for (let round = 0; round < ROUNDS_MOST; round++) {
      const remedy = firstRemedy(findings);
      if (!remedy) break;
      document = applyChanges(document, remedy.changes);
      findings = judged(document, profile.value);
      mended.push(`${remedy.label}. ${remedy.cost}`);
    }
    try {
      await writeFile(out, `${JSON.stringify(document, null, 2)}\n`, { flag: 'wx' });
    } catch (error) {
      const isThere = (error as NodeJS.ErrnoException).code === 'EEXIST';
      return refused('io_failed', `${out}: ${isThere ? 'it exists already' : reasonOf(error)}.`);
    }
  }
  const missed = findings.filter(({ hard, verdict }) => hard && verdict === 'misses');
  const count = findings.filter(({ verdict }) => verdict === 'meets').length;
  const lines = [
    ...mended.map((words) => `Mended: ${words}`),
    `${count} of ${findings.length} checks met on ${profile.value.about.name}`,
    ...findings.flatMap(linesOf),
  ];
  const json = { bench: profile.value.about.name, findings, mended, written: out };
  if (missed.length === 0) return done(lines, json);
  const message = `A pack is refused: ${missed.map(({ words }) => words).join(' ')}`;
  return { exitCode: 1, lines, errors: [message], json: { ok: false, code: 'limit_missed', message, ...json } };
}
