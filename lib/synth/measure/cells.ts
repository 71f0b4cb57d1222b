import { log10 } from '../math/exponential';
import type { WaveformContent } from '../types';

/** Power of the null cells inside the painted span against the mean used cell. */
export interface CellNotch {
  /** In all, pooled by power, dB (negative); null when no null cell lies inside the span or nothing is used. */
  allDb: number | null;
  /** Per symbol of the frame, pooled over repeats; NaN where a symbol has no such cell. */
  bySymbolDb: Float64Array;
  nullCells: number;
}

/** The strongest subcarrier that no symbol paints, against the strongest painted one. */
export interface UnpaintedLine {
  subcarrier: number;
  /** dB to the strongest painted subcarrier's mean power. */
  dbc: number;
}

/** Pools found cells into the notch and the unpainted lines. */
export interface CellPower {
  /** Values found in one symbol (2·N, position order); any repeat. */
  add(symbol: number, found: Float64Array): void;
  notch(): CellNotch;
  /** Null when everything or nothing is painted. */
  worstUnpainted(): UnpaintedLine | null;
  /** Mean |Y|² per position over what was added; owned by the caller. */
  linePower(): Float64Array;
  /** All that was added so far, to be put into another one of the same content; owned by this one. */
  readonly sums: CellPowerSums;
  /** Adds what another one of the same content found, `times` as if it had been found so often. */
  take(sums: CellPowerSums, times?: number): void;
}

/** The running sums, as plain numbers: a thread can hand them to another. */
export interface CellPowerSums {
  lines: Float64Array;
  nullPower: Float64Array;
  nullCells: Float64Array;
  usedPower: number;
  usedCells: number;
  added: number;
}

/**
 * Collects the power found in each cell of demodulated symbols. `cells`: L·N inks, read at once and not kept. The span runs from the lowest
 * to the highest subcarrier that any symbol uses. Powers are |Y|² in the unit of what is added. A cell notch is taken on the transform's own
 * subcarriers, so no window bounds it: another figure than spectralNotch.
 */
export function createCellPower(content: WaveformContent, cells: Uint8Array): CellPower {
  const { fftSize, symbolCount } = content;
  const isNull = new Uint8Array(256).fill(1);
  content.tray.forEach((ink, id) => (isNull[id] = ink.role === 'null' ? 1 : 0));
  const isPainted = new Uint8Array(fftSize);
  for (let i = 0; i < cells.length; i++) if (isNull[cells[i]!] === 0) isPainted[i % fftSize] = 1;
  const first = isPainted.indexOf(1);
  const last = isPainted.lastIndexOf(1);
  const lines = new Float64Array(fftSize);
  const nullPower = new Float64Array(symbolCount);
  const nullCells = new Float64Array(symbolCount);
  let usedPower = 0;
  let usedCells = 0;
  let added = 0;
  return {
    add(symbol, found) {
      const row = symbol * fftSize;
      for (let p = 0; p < fftSize; p++) {
        const re = found[2 * p]!;
        const im = found[2 * p + 1]!;
        const power = re * re + im * im;
        lines[p] = lines[p]! + power;
        if (isNull[cells[row + p]!] === 0) {
          usedPower += power;
          usedCells++;
        } else if (first >= 0 && p > first && p < last) {
          nullPower[symbol] = nullPower[symbol]! + power;
          nullCells[symbol] = nullCells[symbol]! + 1;
        }
      }
      added++;
    },
    notch() {
      const mean = usedCells === 0 ? 0 : usedPower / usedCells;
      let power = 0;
      let count = 0;
      const bySymbolDb = new Float64Array(symbolCount).fill(NaN);
      for (let l = 0; l < symbolCount; l++) {
        power += nullPower[l]!;
        count += nullCells[l]!;
        if (nullCells[l]! > 0 && mean > 0) bySymbolDb[l] = 10 * log10(nullPower[l]! / nullCells[l]! / mean);
      }
      return {
        allDb: count === 0 || mean === 0 ? null : 10 * log10(power / count / mean),
        bySymbolDb,
        nullCells: count,
      };
    },
    worstUnpainted: () => worstUnpaintedLine(lines, isPainted),
    linePower: () => lines.map((value) => (added === 0 ? 0 : value / added)),
    get sums(): CellPowerSums {
      return { lines, nullPower, nullCells, usedPower, usedCells, added };
    },
    take(sums, times = 1) {
      for (let p = 0; p < fftSize; p++) lines[p] = lines[p]! + times * sums.lines[p]!;
      for (let l = 0; l < symbolCount; l++) {
        nullPower[l] = nullPower[l]! + times * sums.nullPower[l]!;
        nullCells[l] = nullCells[l]! + times * sums.nullCells[l]!;
      }
      usedPower += times * sums.usedPower;
      usedCells += times * sums.usedCells;
      added += times * sums.added;
    },
  };
}

/**
 * The strongest unpainted line in dBc. `linePower`: power per position p = k + ⌊N/2⌋; `isPainted`: 1 where any symbol uses it.
 * −Infinity dBc where the unpainted lines hold nothing at all.
 */
export function worstUnpaintedLine(linePower: Float64Array, isPainted: Uint8Array): UnpaintedLine | null {
  let carrier = 0;
  let worst = -1;
  for (let p = 0; p < linePower.length; p++) {
    if (isPainted[p] === 1) carrier = Math.max(carrier, linePower[p]!);
    else if (worst < 0 || linePower[p]! > linePower[worst]!) worst = p;
  }
  if (worst < 0 || carrier === 0) return null;
  return { subcarrier: worst - Math.floor(linePower.length / 2), dbc: 10 * log10(linePower[worst]! / carrier) };
}
