import { emptyDocument } from '@/lib/document/newDocument';
import { createLiveWorker } from '@/lib/editor/live/worker';
import type { LiveAnswer } from '@/lib/editor/live/protocol';
import type { Patch } from '@/lib/editor/types';
import type { Ink, WaveformDocument } from '@/lib/synth/index';

// Live edit of one symbol in a short and in a long document: what an edit costs must not follow the length of the frame.

const N = 2048;

const tray: Ink[] = [
  { inkId: 'k0', name: 'Null', role: 'null', powerDb: 0, value: null },
  ...(['qpsk', '64qam'] as const).map((constellation, i): Ink => ({
    inkId: `k${i + 1}`,
    name: constellation,
    role: 'data',
    powerDb: 0,
    value: { constellation, bitMap: 'ts38211', streamId: 's0' },
  })),
  {
    inkId: 'k3',
    name: 'Pilot',
    role: 'pilot',
    powerDb: 0,
    value: { factors: [{ sequence: { kind: 'gold', cInit: 77, points: 'qpsk' }, counter: 'symbolCell', start: 0 }] },
  },
];

function longDocument(symbolCount: number): WaveformDocument {
  const used = 1200;
  const guard = (N - used) / 2;
  const plain = [guard, 0, used / 2, 1, used / 2, 2, guard, 0];
  const pilots: number[] = [guard, 0];
  for (let p = 0; p < used; p += 12) pilots.push(1, 3, 11, p < used / 2 ? 1 : 2);
  pilots.push(guard, 0);
  const rowOfSymbol = Array.from({ length: symbolCount }, (_, l) => (l % 3 === 2 ? 1 : 0));
  const grid = { rows: [plain, pilots], rowOfSymbol };
  return emptyDocument({ content: { fftSize: N, symbolCount, prefixSamples: [160, 144, 144], tray, grid } });
}

/** One cell painted in the middle of a symbol, and painted back. */
function flip(symbol: number, isBack: boolean): Patch {
  const change = [1, isBack ? 2 : 1];
  const other = [1, isBack ? 1 : 2];
  const start = N / 2 - 100;
  return {
    label: 'Paint 1 cell',
    changes: [{ kind: 'cells', rows: [{ symbol, symbols: 1, start, before: change, after: other }] }],
  };
}

interface Desk {
  /** Milliseconds from a patch to its answer. */
  edit(symbol: number, isBack: boolean): number;
}

function openDesk(symbolCount: number): Desk {
  const tasks: (() => void)[] = [];
  let last: LiveAnswer | null = null;
  const worker = createLiveWorker({ post: (answer) => (last = answer), later: (task) => tasks.push(task) });
  const settle = () => {
    for (let task = tasks.shift(); task; task = tasks.shift()) task();
  };
  const view = {
    symbol: 5,
    timeWidthPx: 412,
    timeRange: null,
    spectrumWidthPx: 782,
    positionRange: { from: 0, to: N },
    ink: 2,
  };
  worker.receive({ kind: 'open', document: longDocument(symbolCount), changeCount: 0, view });
  settle();
  let sequence = 0;
  return {
    edit(symbol, isBack) {
      const begin = performance.now();
      sequence++;
      worker.receive({ kind: 'patch', sequence, changeCount: sequence, patch: flip(symbol, isBack) });
      settle();
      const took = performance.now() - begin;
      if (last?.kind !== 'result' || last.result.changeCount !== sequence) throw new Error('no answer');
      return took;
    },
  };
}

/** The quiet tenth: what an edit takes when nothing else has the processor. */
const quiet = (values: number[]) => [...values].sort((a, b) => a - b)[Math.floor(values.length / 10)]!;

export interface LiveEditFigures {
  shortMs: number;
  longMs: number;
  /** Long over short: at most 1.3. */
  ratio: number;
}

/** Quiet tenths of interleaved edits in a document of 14 and one of 1024 symbols. */
export function runLiveEdit(rounds = 150): LiveEditFigures {
  const short = openDesk(14);
  const long = openDesk(1024);
  const times = { short: [] as number[], long: [] as number[] };
  for (let round = 0; round < rounds + 20; round++) {
    // Warm rounds first: the engine compiles what runs often.
    const isBack = round % 2 === 1;
    // The same walk over neighbours in both, so that both find as much kept.
    const symbol = 1 + ((5 * Math.floor(round / 2)) % 12);
    const shortMs = short.edit(symbol, isBack);
    const longMs = long.edit(500 + symbol, isBack);
    if (round < 20) continue;
    times.short.push(shortMs);
    times.long.push(longMs);
  }
  const shortMs = quiet(times.short);
  const longMs = quiet(times.long);
  return { shortMs, longMs, ratio: longMs / shortMs };
}
