import type { Settings } from '../types';

/** How an ink's cells depend on cells before them: which later symbols an edit of its number of cells reaches. */
interface Reach {
  /** The running stream that its cells take bits from, or −1. */
  stream: number;
  bits: number;
  /** Its value counts the ink's own cells of the whole frame. */
  countsCells: boolean;
}

const BITS = {
  bpsk: 1,
  'pi2-bpsk': 1,
  qpsk: 2,
  '16qam': 4,
  '64qam': 6,
  '256qam': 8,
  '1024qam': 10,
  '4096qam': 12,
} as const;

function reachOf({ tray, streams }: Settings): Reach[] {
  return tray.map((ink) => {
    if (ink.role === 'data') {
      const stream = streams.findIndex(({ streamId }) => streamId === ink.value.streamId);
      const isRunning = streams[stream]?.fill === 'running';
      return {
        stream: isRunning ? stream : -1,
        bits: BITS[ink.value.constellation],
        countsCells: isRunning && ink.value.constellation === 'pi2-bpsk',
      };
    }
    const counts = ink.role === 'pilot' && ink.value.factors.some(({ counter }) => counter === 'cell');
    return { stream: -1, bits: 0, countsCells: counts };
  });
}

/** Tells which symbols an edited row changes, itself and (where streams run or cells are counted) later ones. */
export interface EditReach {
  /** Inks in use by symbol: told at the start and after each edit. O(N). */
  note(symbol: number, row: Uint8Array): void;
  /**
   * Marks in `marks` (one byte a symbol) the later symbols whose values move when a row changes from `before` to `after`.
   * Without running streams and counted cells this looks at the row alone.
   */
  markLater(symbol: number, before: Uint8Array, after: Uint8Array, marks: Uint8Array): void;
  /** The inks that stand in a symbol. */
  holds(symbol: number, ink: number): boolean;
}

export function createEditReach(settings: Settings): EditReach {
  const inks = reachOf(settings);
  const { symbolCount } = settings;
  const kinds = inks.length;
  const used = new Uint8Array(symbolCount * kinds);
  const moved = new Int32Array(kinds);

  return {
    note(symbol, row) {
      const mine = used.subarray(symbol * kinds, (symbol + 1) * kinds);
      mine.fill(0);
      for (let p = 0; p < row.length; p++) mine[row[p]!] = 1;
    },
    holds: (symbol, ink) => used[symbol * kinds + ink] === 1,
    markLater(symbol, before, after, marks) {
      moved.fill(0);
      for (let p = 0; p < before.length; p++) {
        moved[before[p]!]!--;
        moved[after[p]!]!++;
      }
      const bitsMoved = new Array<number>(settings.streams.length).fill(0);
      inks.forEach(({ stream, bits }, ink) => {
        if (stream >= 0) bitsMoved[stream]! += bits * moved[ink]!;
      });
      const reached = inks.flatMap(({ stream, countsCells }, ink) =>
        (stream >= 0 && bitsMoved[stream] !== 0) || (countsCells && moved[ink] !== 0) ? [ink] : [],
      );
      if (reached.length === 0) return;
      for (let later = symbol + 1; later < symbolCount; later++)
        if (reached.some((ink) => used[later * kinds + ink] === 1)) marks[later] = 1;
    },
  };
}
