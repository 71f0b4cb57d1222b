import { prefixSum, usableGuard } from '../numerology';
import type { WaveformContent } from '../types';

/** One way to read the pilots' lattice. A shifted comb has two. */
export interface ReachPair {
  /** `eachSymbol`: every pilot symbol alone, then along time. `acrossSymbols`: along each pilot subcarrier first, then all of them. */
  kind: 'eachSymbol' | 'acrossSymbols';
  /** The largest hole between neighbouring pilots, in subcarriers and in symbols; null where there is no second pilot. */
  subcarrierHole: number | null;
  symbolHole: number | null;
  /** 1/(D_f·Δf): one-sided when the first path's time is known, ± half of it otherwise. */
  delayWindowSec: number | null;
  halfDelayWindowSec: number | null;
  /** Largest |f_D|: 1/(2·D_t·T_s). */
  dopplerHz: number | null;
  /** Usable guard over the one-sided window: a delay as long as the guard uses so much of it. */
  guardShare: number | null;
  /** Expected over largest Doppler; null without an expectation. */
  dopplerShare: number | null;
  /** Either share is 0.8 or more. */
  caution: boolean;
}

/** What the pilots can follow, beside the guard that they should follow. */
export interface PilotReach {
  /** Empty without pilots; one pair when both readings agree. */
  pairs: ReachPair[];
  usableGuardSec: number;
  /** Every pair asks for caution: no reading of the lattice follows what is expected with room to spare. */
  caution: boolean;
}

/** A share of the reach from which on the interface cautions (the sampling theorem leaves no room at 1). */
const CAUTION_SHARE = 0.8;

/** The pilots' positions of every symbol, rising, from the cells or from the document's runs (one list a distinct row). */
function pilotRows(content: WaveformContent, cells?: Uint8Array): number[][] {
  const size = content.fftSize;
  const isPilot = new Uint8Array(256);
  content.tray.forEach((ink, id) => (isPilot[id] = ink.role === 'pilot' ? 1 : 0));
  if (cells) {
    return Array.from({ length: content.symbolCount }, (_, l) => {
      const row: number[] = [];
      for (let p = 0; p < size; p++) if (isPilot[cells[l * size + p]!] === 1) row.push(p);
      return row;
    });
  }
  const rows = content.grid.rows.map((runs) => {
    const row: number[] = [];
    let position = 0;
    for (let i = 0; i + 1 < runs.length; i += 2) {
      if (isPilot[runs[i + 1]!] === 1) for (let j = 0; j < runs[i]!; j++) row.push(position + j);
      position += runs[i]!;
    }
    return row;
  });
  return content.grid.rowOfSymbol.map((row) => rows[row]!);
}

function largestHole(rising: readonly number[]): number | null {
  let hole: number | null = null;
  for (let i = 1; i < rising.length; i++) hole = Math.max(hole ?? 0, rising[i]! - rising[i - 1]!);
  return hole;
}

/**
 * The longest delay spread and highest Doppler that the pilots' spacing can follow (sampling theorem in time and frequency; e.g.
 * Hoeher, Kaiser, Robertson, "Two-dimensional pilot-symbol-aided channel estimation", ICASSP 1997). Holes are those between
 * neighbouring pilots inside the frame; a lattice with one pilot symbol is followed from repeat to repeat where the frame repeats. The
 * largest hole decides, never the mean. `expected` (what somebody wants to follow) defaults to a delay as long as the usable guard.
 * `cells`: L·N inks in place of the document's grid, not changed. Seconds and hertz; allocates one list of positions a symbol.
 */
export function pilotReach(
  content: WaveformContent,
  cells?: Uint8Array,
  expected: { delaySpreadSec?: number; dopplerHz?: number } = {},
): PilotReach {
  const { fftSize, symbolCount, timing } = content;
  const [numerator, denominator] = content.subcarrierSpacingHz;
  const seconds = (samples: number): number => (samples * denominator) / (fftSize * numerator);
  const usableGuardSec = seconds(usableGuard(content));
  const frameSamples = prefixSum(content) + symbolCount * fftSize;
  const symbolSamples = frameSamples / symbolCount;
  const rows = pilotRows(content, cells);
  const repeats = timing.mode === 'loop' || timing.repeats > 1;
  // the same cell one repeat later, in symbols of mean length
  const repeatSymbols = repeats ? (frameSamples + timing.gapSamples) / symbolSamples : null;

  const pilotSymbols: number[] = [];
  const last = new Int32Array(fftSize).fill(-1);
  const seen = new Uint8Array(fftSize);
  let holeInSymbol: number | null = 0;
  let holeAlongSubcarrier: number | null = 0;
  for (let l = 0; l < symbolCount; l++) {
    const row = rows[l]!;
    if (row.length === 0) continue;
    pilotSymbols.push(l);
    const hole = largestHole(row);
    holeInSymbol = hole === null || holeInSymbol === null ? null : Math.max(holeInSymbol, hole);
    for (const p of row) {
      if (seen[p] !== 0) holeAlongSubcarrier = Math.max(holeAlongSubcarrier, l - last[p]!);
      seen[p] = Math.min(2, seen[p]! + 1);
      last[p] = l;
    }
  }
  if (pilotSymbols.length === 0) return { pairs: [], usableGuardSec, caution: false };
  const subcarriers: number[] = [];
  for (let p = 0; p < fftSize; p++) {
    if (seen[p] === 0) continue;
    subcarriers.push(p);
    if (seen[p] === 1) {
      holeAlongSubcarrier =
        repeatSymbols === null || holeAlongSubcarrier === null ? null : Math.max(holeAlongSubcarrier, repeatSymbols);
    }
  }

  const delay = expected.delaySpreadSec ?? usableGuardSec;
  const pair = (kind: ReachPair['kind'], subcarrierHole: number | null, symbolHole: number | null): ReachPair => {
    const window = subcarrierHole === null ? null : denominator / (subcarrierHole * numerator);
    const doppler = symbolHole === null ? null : 1 / (2 * symbolHole * seconds(symbolSamples));
    const guardShare = window === null ? null : delay / window;
    const dopplerShare = doppler === null || expected.dopplerHz === undefined ? null : expected.dopplerHz / doppler;
    return {
      kind,
      subcarrierHole,
      symbolHole,
      delayWindowSec: window,
      halfDelayWindowSec: window === null ? null : window / 2,
      dopplerHz: doppler,
      guardShare,
      dopplerShare,
      caution: (guardShare ?? 0) >= CAUTION_SHARE || (dopplerShare ?? 0) >= CAUTION_SHARE,
    };
  };
  const pairs = [pair('eachSymbol', holeInSymbol, largestHole(pilotSymbols) ?? repeatSymbols)];
  const across = pair('acrossSymbols', largestHole(subcarriers), holeAlongSubcarrier);
  if (across.subcarrierHole !== pairs[0]!.subcarrierHole || across.symbolHole !== pairs[0]!.symbolHole)
    pairs.push(across);
  return { pairs, usableGuardSec, caution: pairs.every((one) => one.caution) };
}
