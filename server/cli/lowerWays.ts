import {
  createPhaseSearch,
  createSeedSearch,
  expandGrid,
  seedsOf,
  type PeakSearch,
  type Stream,
  type WaveformContent,
} from '@/lib/synth';
import { sampleEngine } from '../sampleEngine.ts';
import type { LowerWay } from './lowerArguments.ts';
import { Cancelled, runSteps } from './runSteps.ts';

/** What a way came to; `content` is null where nothing better was found. `message`: why the document does not take it. */
export type FoundWay =
  | { ok: true; content: WaveformContent | null; words: string; tried: number; chosen: Record<string, unknown> }
  | { ok: false; message: string };

const USUAL_SEEDS = 100;
const ruleNames = { newman: 'Newman', schroeder: 'Schroeder' };
const tries = (count: number): string => (count === 1 ? '1 try' : `${count} tries`);
const notOpen = (message: string): FoundWay => ({ ok: false, message });

/** Finds the content that a way makes of a document's. Throws Cancelled. */
export async function findWay(content: WaveformContent, way: LowerWay, signal: AbortSignal): Promise<FoundWay> {
  const cells = expandGrid(content.grid, content.fftSize);
  const counts = new Array<number>(content.tray.length).fill(0);
  for (const ink of cells) counts[ink]!++;
  const hasRole = (role: string) => content.tray.some((ink, place) => ink.role === role && counts[place]! > 0);
  switch (way.method) {
    case 'phases': {
      if (!hasRole('pilot') && !hasRole('tone')) return notOpen('No pilots and no tones are painted.');
      return findPhases(content, way.law, cells, signal);
    }
    case 'seed': {
      const isPainted = (stream: Stream) =>
        content.tray.some(
          (ink, place) => ink.role === 'data' && ink.value.streamId === stream.streamId && counts[place]! > 0,
        );
      const seeded = content.streams.filter((stream) => seedsOf(stream.source) !== null && isPainted(stream));
      return findSeed(content, way, { seeded, cells, signal });
    }
    case 'reserve':
      if (!hasRole('reserved')) return notOpen('No reserved cells are painted.');
      return reduced(content, 'toneReservation', way);
    case 'clip':
      if (!hasRole('data') && !hasRole('reserved'))
        return notOpen('No data cells are painted: pilots and tones stay as they are.');
      return reduced(content, 'clipAndFilter', way);
  }
}

function reduced(
  content: WaveformContent,
  kind: 'toneReservation' | 'clipAndFilter',
  { targetDb: targetPaprDb, passes: iterations }: { targetDb: number; passes: number },
): FoundWay {
  const peakReduction = { kind, targetPaprDb, iterations };
  return { ok: true, content: { ...content, peakReduction }, words: '', tried: 0, chosen: { peakReduction } };
}

async function findPhases(
  content: WaveformContent,
  law: 'newman' | 'schroeder' | null,
  cells: Uint8Array,
  signal: AbortSignal,
): Promise<FoundWay> {
  const search = createPhaseSearch(content, { cells, engine: sampleEngine(), ...(law === null ? {} : { rule: law }) });
  const { ruled, single } = search.reach;
  // a pilot alone in each of its symbols takes no rule, and no angle
  if (search.total === 0) return notOpen('No symbol has two pilots or two tones: there are no phases to choose.');
  if (law !== null && ruled.length === 0)
    return notOpen(`No symbol has two pilots or two tones: ${ruleNames[law]}'s law has nothing to turn.`);
  await runSearch(search, 'phases', signal);
  const { best, total: tried } = search;
  if (best === null)
    return { ok: true, content: null, words: `No better phases in ${tries(tried)}.`, tried, chosen: {} };
  const inks = new Set(ruled.map(({ ink }) => ink));
  const ruledCells = cells.reduce((sum, ink) => sum + (inks.has(ink) ? 1 : 0), 0);
  const parts = [
    ...(ruledCells > 0 ? [`${ruleNames[best.choice.rule]} on ${ruledCells} cells`] : []),
    ...(single.length > 0 ? [`tone at ${best.choice.toneDeg}°`] : []),
  ];
  const words = `${parts.join(', ')}, the best of ${tries(tried)}`;
  const rule = ruledCells > 0 ? best.choice.rule : null;
  const chosen = { law: rule, ruledCells, toneDeg: single.length > 0 ? best.choice.toneDeg : null };
  return { ok: true, content: best.content, words, tried, chosen };
}

async function findSeed(
  content: WaveformContent,
  { payload, first: asked, count: wanted }: LowerWay & { method: 'seed' },
  { seeded, cells, signal }: { seeded: Stream[]; cells: Uint8Array; signal: AbortSignal },
): Promise<FoundWay> {
  const names = seeded.map(({ name }) => name).join(', ');
  if (seeded.length === 0) return notOpen('No payload with a seed is painted.');
  const stream =
    payload === null
      ? seeded[0]!
      : (seeded.find(({ streamId }) => streamId === payload) ?? seeded.find(({ name }) => name === payload));
  if (!stream) return notOpen(`No painted payload with a seed is called "${payload}". There are: ${names}.`);
  const { least, most, now } = seedsOf(stream.source)!;
  const first = asked ?? least;
  const count = wanted ?? Math.min(USUAL_SEEDS, most - first + 1);
  if (first < least || count < 1 || first + count - 1 > most)
    return notOpen(`The seeds of ${stream.name} go from ${least} to ${most}.`);
  const range = { streamId: stream.streamId, first, count };
  const search = createSeedSearch(content, range, { cells, engine: sampleEngine() });
  await runSearch(search, 'seed', signal);
  const { best, total: tried } = search;
  const which = `${tries(tried)} from ${first} on`;
  if (best === null)
    return {
      ok: true,
      content: null,
      words: `No better seed than ${now} of ${stream.name} in ${which}.`,
      tried,
      chosen: {},
    };
  const { choice: seed } = best;
  const words = `seed ${seed} of ${stream.name} in place of ${now}, the best of ${which}; the bits change`;
  return { ok: true, content: best.content, words, tried, chosen: { ...range, seed, seedBefore: now } };
}

async function runSearch(search: PeakSearch<unknown>, what: string, signal: AbortSignal): Promise<void> {
  const words = (): string => {
    const best = search.best ? `, best ${search.best.paprDb.toFixed(2)} dB` : '';
    return `Trying ${what} ${Math.min(search.total, search.done + 1)} of ${search.total}${best}`;
  };
  if (!(await runSteps(() => search.step(), words, signal))) throw new Cancelled();
}
