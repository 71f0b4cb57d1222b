import { log10 } from '../math/exponential';
import type { Cycle } from './cycle';
import type { NullPower } from './types';

/** Collects the power found in null cells. */
export interface NullPowerMeter {
  /** One symbol of the frame (0…L−1): 2·N found values, as received. */
  add(symbol: number, found: Float64Array): void;
  result(): NullPower;
}

/** Null cells inside the painted span that the capture's band holds (|k| ≤ `captured`), against the mean used cell. */
export function createNullPowerMeter(cycle: Cycle, captured: number): NullPowerMeter {
  const { fftSize, symbolCount, tray } = cycle.content;
  const half = Math.floor(fftSize / 2);
  const { cells } = cycle;
  const isNull = new Uint8Array(256).fill(1);
  tray.forEach((ink, place) => (isNull[place] = ink.role === 'null' ? 1 : 0));
  const first = Math.max(cycle.usedLow + half, half - captured);
  const last = Math.min(cycle.usedHigh + half, half + captured);
  const span = Math.max(0, last - first + 1);
  const power = new Float64Array(span * symbolCount);
  const counts = new Float64Array(symbolCount);
  let usedPower = 0;
  let usedCells = 0;
  return {
    add(symbol, found) {
      counts[symbol] = counts[symbol]! + 1;
      for (let p = first; p <= last; p++) {
        const re = found[2 * p]!;
        const im = found[2 * p + 1]!;
        const here = re * re + im * im;
        if (isNull[cells[symbol * fftSize + p]!] === 0) {
          usedPower += here;
          usedCells++;
        } else {
          const at = symbol * span + p - first;
          power[at] = power[at]! + here;
        }
      }
    },
    result() {
      const mean = usedCells === 0 ? 0 : usedPower / usedCells;
      const inDb = (sum: number, count: number): number => 10 * log10(sum / count / mean);
      const isEmpty = new Uint8Array(span).fill(1);
      for (let symbol = 0; symbol < symbolCount; symbol++)
        for (let i = 0; i < span; i++) if (isNull[cells[symbol * fftSize + first + i]!] === 0) isEmpty[i] = 0;
      let insidePower = 0;
      let insideCells = 0;
      let worst: NullPower['worst'] = null;
      let worstPower = -1;
      for (let symbol = 0; symbol < symbolCount; symbol++) {
        if (counts[symbol] === 0) continue;
        for (let i = 0; i < span; i++) {
          if (isNull[cells[symbol * fftSize + first + i]!] === 0) continue;
          const here = power[symbol * span + i]!;
          insidePower += here;
          insideCells += counts[symbol]!;
          if (here / counts[symbol]! > worstPower) {
            worstPower = here / counts[symbol]!;
            worst = { symbol, subcarrier: first + i - half, db: mean === 0 ? -Infinity : inDb(worstPower, 1) };
          }
        }
      }
      if (mean === 0 || insideCells === 0) return { notch: null, inside: null, worst: null };
      let notch: NullPower['notch'] = null;
      const run = widestRun(isEmpty);
      if (run.length >= 2) {
        let notchPower = 0;
        let notchCells = 0;
        for (let symbol = 0; symbol < symbolCount; symbol++) {
          notchCells += counts[symbol]! * run.length;
          for (let i = run.start; i < run.start + run.length; i++) notchPower += power[symbol * span + i]!;
        }
        notch = {
          lowSubcarrier: first + run.start - half,
          highSubcarrier: first + run.start + run.length - 1 - half,
          cells: notchCells,
          db: inDb(notchPower, notchCells),
        };
      }
      return { notch, inside: { cells: insideCells, db: inDb(insidePower, insideCells) }, worst };
    },
  };
}

function widestRun(isEmpty: Uint8Array): { start: number; length: number } {
  let best = { start: 0, length: 0 };
  for (let i = 0; i < isEmpty.length;) {
    let end = i;
    while (end < isEmpty.length && isEmpty[end] === 1) end++;
    if (end - i > best.length) best = { start: i, length: end - i };
    i = end + 1;
  }
  return best;
}
