import { pilotReach } from '@/lib/synth/index';
import type { PilotReach, WaveformContent } from '@/lib/synth/index';
import type { Settings } from '../types';

/** The pilots of each symbol as runs, so that the reach costs the pilots and not all cells. */
export interface PilotRows {
  note(symbol: number, row: Uint8Array): void;
  reach(): PilotReach;
}

export function createPilotRows(settings: Settings): PilotRows {
  const isPilot = settings.tray.map(({ role }) => role === 'pilot');
  const bare = [settings.fftSize, 0];
  const rows: number[][] = new Array<number[]>(settings.symbolCount).fill(bare);
  let known: PilotReach | null = null;

  return {
    note(symbol, row) {
      const runs: number[] = [];
      let at = 0;
      for (let p = 0; p < row.length; p++) {
        const ink = row[p]!;
        if (!isPilot[ink]) continue;
        if (p > at) runs.push(p - at, 0);
        runs.push(1, ink);
        at = p + 1;
      }
      const before = rows[symbol]!;
      if (at === 0) rows[symbol] = bare;
      else {
        if (at < row.length) runs.push(row.length - at, 0);
        rows[symbol] = runs;
      }
      if (before !== rows[symbol] && before.join() !== rows[symbol]!.join()) known = null;
    },
    reach() {
      if (known) return known;
      const grid = { rows, rowOfSymbol: rows.map((_, symbol) => symbol) };
      const content: WaveformContent = { ...settings, grid };
      return (known = pilotReach(content));
    },
  };
}
