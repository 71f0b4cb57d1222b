import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { parseWaveformDocument } from '@/lib/document/parse';
import { seedsOf, streamsWithSeed, type WaveformDocument } from '@/lib/synth';
import { parseCommand } from '@/server/cli/arguments';
import { inspect } from '@/server/cli/inspect';
import { lower } from '@/server/cli/lower';
import { smallDocument } from '../../../helpers/documents';

let folder: string;
beforeEach(() => (folder = mkdtempSync(path.join(tmpdir(), 'lower-'))));
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const file = (name: string) => path.join(folder, name);

function put(document: WaveformDocument, name = 'w.json'): string {
  writeFileSync(file(name), JSON.stringify(document));
  return file(name);
}

/** The command line as a person types it, on a document that is put beside. */
async function run(document: WaveformDocument, ...options: string[]) {
  const argv = ['lower', put(document), '--out', file('low.json'), ...options];
  const parsed = parseCommand(argv);
  if (!parsed.ok || parsed.command.name !== 'lower') throw new Error('no lower command');
  return lower(parsed.command, new AbortController().signal);
}

/** What inspect measures, a command of its own. */
async function inspected(name: string): Promise<number> {
  const outcome = await inspect({ document: file(name) });
  return (outcome.json as unknown as { papr: { frameDb: number } }).papr.frameDb;
}

function written(): WaveformDocument {
  const parsed = parseWaveformDocument(readFileSync(file('low.json')));
  if (!parsed.ok) throw new Error('what was written is no valid document');
  return parsed.value;
}

interface Report {
  before: { frameDb: number };
  after: { frameDb: number };
  chosen: Record<string, unknown>;
  target: { isReached: boolean; bestDb: number } | null;
  peakReduction: { reachedPaprDb: number } | null;
}
const reportOf = (outcome: { json: Record<string, unknown> }) => outcome.json as unknown as Report;

/** The small document with its left band's data in reserved cells. */
function reservedDocument(): WaveformDocument {
  const document = smallDocument();
  const { tray, grid } = document.content;
  const rows = grid.rows.map((row) => row.map((part, i) => (i === 7 ? 3 : part)));
  const reserved = { inkId: 'k3', name: 'Reserved', role: 'reserved', powerDb: 0, value: null } as const;
  return { ...document, content: { ...document.content, tray: [...tray, reserved], grid: { ...grid, rows } } };
}

test('seed: the best of every seed that was asked for, and nothing else changes', async () => {
  const document = smallDocument();
  const [stream] = document.content.streams;
  const outcome = await run(document, '--method', 'seed', '--first', '3', '--seeds', '6', '--payload', stream!.name);
  expect(outcome).toMatchObject({ exitCode: 0, errors: [], json: { ok: true, tried: 6 } });
  const figures: number[] = [];
  for (let seed = 3; seed < 9; seed++) {
    const streams = streamsWithSeed(document.content.streams, stream!.streamId, seed);
    put({ ...document, content: { ...document.content, streams } }, 'try.json');
    figures.push(await inspected('try.json'));
  }
  const best = figures.indexOf(Math.min(...figures)) + 3;
  expect(seedsOf(written().content.streams[0]!.source)!.now).toBe(best);
  expect(await inspected('low.json')).toBe(Math.min(...figures));
  const { before, after } = reportOf(outcome);
  expect([before.frameDb, after.frameDb]).toEqual([await inspected('w.json'), Math.min(...figures)]);
  const text = outcome.lines.join('\n');
  expect(text).toMatch(/before +\d+\.\d\d dB over the frame, interpolated 4 times, worst symbol \d+\.\d\d dB/);
  expect(text).toContain(`after           ${after.frameDb.toFixed(2)} dB over the frame`);
  expect(text).toContain(`seed ${best} of ${stream!.name} in place of`);
  const { streams, ...rest } = written().content;
  expect(streams).toHaveLength(1);
  expect({ ...rest, streams: document.content.streams }).toEqual(document.content);
});

test('phases: one law or the lower of both, on the pilots', async () => {
  const document = smallDocument();
  const reached: number[] = [];
  for (const law of ['newman', 'schroeder']) {
    const factors = [{ sequence: { kind: law, count: 4 }, counter: 'symbolCell', start: 0 }];
    const tray = document.content.tray.map((ink) => (ink.role === 'pilot' ? { ...ink, value: { factors } } : ink));
    put({ ...document, content: { ...document.content, tray } } as WaveformDocument, 'try.json');
    reached.push(await inspected('try.json'));
  }
  const outcome = await run(document, '--method', 'phases');
  expect(outcome.exitCode).toBe(0);
  const [newman, schroeder] = [reached[0]!, reached[1]!];
  expect(newman).toBeLessThan(schroeder);
  expect(await inspected('low.json')).toBe(newman);
  expect(outcome.lines.join('\n')).toMatch(/chosen +Newman on 16 cells, the best of 2 tries/);
  rmSync(file('low.json'));
  // the other law stands above what is there
  expect(schroeder).toBeGreaterThan(await inspected('w.json'));
  const other = await run(document, '--method', 'phases', '--law', 'schroeder');
  expect(other.errors).toEqual(['No better phases in 1 try. Nothing was written.']);
  expect(existsSync(file('low.json'))).toBe(false);
});

test('clip: a target that is missed is written with the best found, and ends with 1', async () => {
  const outcome = await run(smallDocument(), '--method', 'clip', '--target', '5', '--passes', '3');
  expect(outcome.exitCode).toBe(1);
  expect(outcome.errors[0]).toMatch(/^The target of 5\.00 dB was not reached: [5-9]\.\d\d dB is the best, written to /);
  expect(outcome.json).toMatchObject({ ok: false, code: 'target_missed', target: { isReached: false } });
  expect(written().content.peakReduction).toEqual({ kind: 'clipAndFilter', targetPaprDb: 5, iterations: 3 });
  const { before, after } = reportOf(outcome);
  expect(await inspected('low.json')).toBe(after.frameDb);
  expect(after.frameDb).toBeLessThan(before.frameDb - 0.5);
  expect(outcome.lines.join('\n')).toMatch(/its cost +EVM of the data \d/);
});

test('reserve: fills reserved cells down to a target, in place of another reduction', async () => {
  const document = reservedDocument();
  document.content.peakReduction = { kind: 'clipAndFilter', targetPaprDb: 12, iterations: 1 };
  const outcome = await run(document, '--method', 'reserve', '--target', '8');
  expect(outcome).toMatchObject({ exitCode: 0, json: { target: { isReached: true } } });
  expect(written().content.peakReduction).toEqual({ kind: 'toneReservation', targetPaprDb: 8, iterations: 40 });
  const { after, peakReduction } = reportOf(outcome);
  expect(await inspected('low.json')).toBe(after.frameDb);
  expect(peakReduction!.reachedPaprDb).toBeLessThanOrEqual(8 + 1e-9);
  const text = outcome.lines.join('\n');
  expect(text).toContain('replaces        clip and filter, 12.00 dB');
  expect(text).toContain('tone reservation, 8.00 dB over the mean reached');
});

test('a search that beats nothing writes nothing and says how many it tried', async () => {
  const document = smallDocument();
  const { now } = seedsOf(document.content.streams[0]!.source)!;
  const outcome = await run(document, '--method', 'seed', '--first', `${now}`, '--seeds', '1', '--target', '40');
  expect(outcome).toMatchObject({ exitCode: 1, json: { code: 'nothing_better', tried: 1, written: null } });
  expect(outcome.errors[0]).toMatch(/^No better seed than \d+ of .+ in 1 try from \d+ on\. Nothing was written\.$/);
  expect(outcome.lines.join('\n')).toContain('before');
  expect(readdirSync(folder)).toEqual(['w.json']);
});

const bare = () => smallDocument({ grid: { rows: [[64, 0]], rowOfSymbol: [0, 0, 0, 0] } });
test.each([
  ['nothing painted', bare, ['clip', '--target', '8'], 'Nothing that sends power is painted'],
  ['nothing painted', bare, ['seed', '--target', '8'], 'Nothing that sends power is painted'],
  ['no reserved cells', smallDocument, ['reserve', '--target', '8'], 'No reserved cells are painted.'],
  ['no such payload', smallDocument, ['seed', '--payload', 'X'], 'No painted payload with a seed is called "X"'],
  ['seeds beyond the last', smallDocument, ['seed', '--first', '4294967295'], 'go from 1 to '],
])('%s is said in words, and nothing is written (%#)', async (_what, document, [method, ...rest], words) => {
  const outcome = await run(document(), '--method', method!, ...rest);
  expect(outcome.exitCode).toBe(1);
  expect(outcome.errors.join(' ')).toContain(words);
  expect(readdirSync(folder)).toEqual(['w.json']);
});

test('neither its input nor a file that exists is overwritten', async () => {
  const document = put(smallDocument());
  const before = readFileSync(document, 'utf8');
  const way = { method: 'clip', targetDb: 8, passes: 1 } as const;
  const { signal } = new AbortController();
  const same = await lower({ name: 'lower', document, way, out: document, json: false }, signal);
  expect(same.errors).toEqual([`${document} is one of the inputs; nothing was written.`]);
  writeFileSync(file('low.json'), 'mine');
  const there = await lower({ name: 'lower', document, way, out: file('low.json'), json: false }, signal);
  expect(there.errors).toEqual([`${file('low.json')}: it exists already.`]);
  expect([readFileSync(document, 'utf8'), readFileSync(file('low.json'), 'utf8')]).toEqual([before, 'mine']);
});

test('a cancel ends the search and keeps nothing', async () => {
  const document = put(smallDocument());
  const way = { method: 'seed', payload: null, first: null, count: 10000, targetDb: null } as const;
  const controller = new AbortController();
  const running = lower({ name: 'lower', document, way, out: file('low.json'), json: false }, controller.signal);
  controller.abort();
  expect(await running).toMatchObject({ exitCode: 1, json: { code: 'cancelled' } });
  expect(readdirSync(folder)).toEqual(['w.json']);
});
