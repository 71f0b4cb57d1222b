import { access, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { parseWaveformDocument } from '@/lib/document/parse';
import { interpolationOf, type PeakFigures, type WaveformContent, type WaveformDocument } from '@/lib/synth';
import type { LowerCommand } from './lowerArguments.ts';
import { findWay, type FoundWay } from './lowerWays.ts';
import { done, refused, type Outcome } from './outcome.ts';
import {
  decibels,
  describePeak,
  describeReduction,
  kindWords,
  measurePeak,
  peakRows,
  reductionRows,
  rowLines,
} from './peakRows.ts';
import { readDocument, reasonOf } from './readInputs.ts';
import { Cancelled } from './runSteps.ts';

/** A peak at the target stands a rounding above it: as many digits as a figure shows. */
const ROUNDING_DB = 1e-9;

/** lower document.json --method way --out lowered.json: a lower peak, its figures before and after, and the changed document. */
export async function lower(command: LowerCommand, signal: AbortSignal): Promise<Outcome> {
  const read = await readDocument(command.document);
  if (!read.ok) return read.outcome;
  const { out } = command;
  if (path.resolve(command.document) === path.resolve(out))
    return refused('invalid', `${out} is one of the inputs; nothing was written.`);
  // a search of minutes is not begun for a name that is taken
  if (await isThere(out)) return refused('io_failed', `${out}: it exists already.`);
  try {
    return await lowerDocument(command, read.value, signal);
  } catch (error) {
    if (error instanceof Cancelled) return refused('cancelled', 'Cancelled. Nothing was kept.');
    throw error;
  }
}

const isThere = (file: string): Promise<boolean> =>
  access(file).then(
    () => true,
    () => false,
  );

async function lowerDocument(
  { way, out }: LowerCommand,
  document: WaveformDocument,
  signal: AbortSignal,
): Promise<Outcome> {
  const { content } = document;
  const before = await measurePeak(content, 'Measuring', signal);
  if (before.paprDb === null)
    return refused('nothing_painted', 'Nothing that sends power is painted: there is no peak to lower.');
  const found = await findWay(content, way, signal);
  if (!found.ok) return refused('way_not_open', found.message);
  const words = `, interpolated ${interpolationOf(content.oversampling)} times`;
  const beforeRows = peakRows(before, 'before', words);
  if (found.content === null) {
    const message = `${found.words} Nothing was written.`;
    const json = { code: 'nothing_better', message, before: describePeak(before), tried: found.tried, written: null };
    const lines = [document.about.title, ...rowLines(beforeRows)];
    return { exitCode: 1, lines, errors: [message], json: { ok: false, ...json } };
  }
  const lowered = { ...document, content: found.content };
  const after = await measurePeak(found.content, 'Measuring what was found', signal);
  const text = `${JSON.stringify(lowered, null, 2)}\n`;
  const parsed = parseWaveformDocument(Buffer.from(text));
  if (!parsed.ok)
    return refused(
      'invalid',
      'The lowered document would not be a valid one; nothing was written.',
      parsed.issues.map(({ pointer, message }) => ({ where: 'document', pointer, message })),
      parsed.more,
    );
  try {
    await writeFile(out, text, { flag: 'wx' });
  } catch (error) {
    const isTaken = (error as NodeJS.ErrnoException).code === 'EEXIST';
    return refused('io_failed', `${out}: ${isTaken ? 'it exists already' : reasonOf(error)}.`);
  }
  const changed = { after, lowered: found.content, out, targetDb: way.targetDb };
  return report({ title: document.about.title, content, before, beforeRows, found, ...changed });
}

interface Lowered {
  title: string;
  content: WaveformContent;
  before: PeakFigures;
  beforeRows: [string, string][];
  found: FoundWay & { ok: true };
  lowered: WaveformContent;
  after: PeakFigures;
  out: string;
  targetDb: number | null;
}

function report({ title, content, before, beforeRows, found, lowered, after, out, targetDb }: Lowered): Outcome {
  const isReduction = lowered.peakReduction !== content.peakReduction;
  // its own report stands over the mean before it, as its target does; a search's target is the PAPR of the frame
  const reduction = isReduction ? after.reduction : null;
  const bestDb = reduction ? reduction.reachedPaprDb : after.paprDb;
  const isReached =
    targetDb === null ? null : reduction ? reduction.isReached : bestDb !== null && bestDb <= targetDb + ROUNDING_DB;
  const replaced = content.peakReduction;
  const rows: [string, string][] = [
    ...beforeRows,
    ...peakRows(after, 'after', ''),
    ...(reduction ? reductionRows(reduction) : [['chosen', found.words] satisfies [string, string]]),
    ...(isReduction && replaced.kind !== 'none'
      ? [['replaces', `${kindWords[replaced.kind]}, ${decibels(replaced.targetPaprDb)}`] satisfies [string, string]]
      : []),
    ...(!reduction && isReached !== null
      ? [['target', `${decibels(targetDb)} ${isReached ? 'reached' : 'not reached'}`] satisfies [string, string]]
      : []),
    ['written', out],
  ];
  const lines = [title, ...rowLines(rows)];
  const json = {
    before: describePeak(before),
    after: describePeak(after),
    tried: found.tried,
    chosen: found.chosen,
    target: targetDb === null ? null : { targetDb, isReached, bestDb },
    peakReduction: reduction === null ? null : describeReduction(reduction, lowered, before),
    written: out,
  };
  if (isReached !== false) return done(lines, json);
  const message = `The target of ${decibels(targetDb)} was not reached: ${decibels(bestDb)} is the best, written to ${out}.`;
  return { exitCode: 1, lines, errors: [message], json: { ok: false, code: 'target_missed', message, ...json } };
}
