import { turnsOf } from '../math/angle';
import { log10 } from '../math/exponential';
import { sineCosine } from '../math/turns';
import type { BoundedDb, ImbalanceReport } from './types';

/** Regresses what the channel does not explain on three things that a receiver or a generator may add. */
export interface ImbalanceMeter {
  /**
   * One symbol, each 2·N values turned back by the symbol's phase: what is left (found − Ĥ·meant), the cells of the capture's conjugate, of
   * a constant 1, and Ĥ(k)·X*(−k); `counts`: 1 for each position that takes part.
   */
  add(
    left: Float64Array,
    mirrored: Float64Array,
    constant: Float64Array,
    generator: Float64Array,
    counts: Uint8Array,
  ): void;
  /** `signalPower`: mean |x|² of the capture in which full scale is 1. */
  result(signalPower: number): ImbalanceReport;
}

/** Least squares in three unknowns over all cells added. Source: normal equations; the error of each is the residual's over its own regressor. */
export function createImbalanceMeter(): ImbalanceMeter {
  const normal = new Float64Array(18); // 3 × 3 complex, row by row: Σ r_i* r_j
  const right = new Float64Array(6); // Σ r_i* left
  let leftPower = 0;
  let cells = 0;
  return {
    add(left, mirrored, constant, generator, counts) {
      const parts = [mirrored, constant, generator];
      for (let p = 0; p < counts.length; p++) {
        if (counts[p] === 0) continue;
        cells++;
        const yRe = left[2 * p]!;
        const yIm = left[2 * p + 1]!;
        leftPower += yRe * yRe + yIm * yIm;
        for (let i = 0; i < 3; i++) {
          const aRe = parts[i]![2 * p]!;
          const aIm = parts[i]![2 * p + 1]!;
          right[2 * i] = right[2 * i]! + aRe * yRe + aIm * yIm;
          right[2 * i + 1] = right[2 * i + 1]! + aRe * yIm - aIm * yRe;
          for (let j = 0; j < 3; j++) {
            const bRe = parts[j]![2 * p]!;
            const bIm = parts[j]![2 * p + 1]!;
            const at = 2 * (3 * i + j);
            normal[at] = normal[at]! + aRe * bRe + aIm * bIm;
            normal[at + 1] = normal[at + 1]! + aRe * bIm - aIm * bRe;
          }
        }
      }
    },
    result(signalPower) {
      const nothing = { image: null, generatorImage: null, gainDb: null, angleDeg: null, dc: null, dcDbfs: null };
      if (cells < 8 || signalPower <= 0) return nothing;
      const size = (i: number): number => normal[8 * i]!;
      const cross = Math.sqrt(normal[4]! * normal[4]! + normal[5]! * normal[5]!);
      // mirrors that fall together: the generator's is left out, the capture's holds both
      const isApart = size(2) > 0 && cross < 0.9 * Math.sqrt(size(0) * size(2));
      const used = [0, 1, 2].filter((i) => size(i) > 1e-12 * size(0) && (i !== 2 || isApart));
      const found = solve(normal, right, used);
      if (found === null) return nothing;
      let explained = 0;
      used.forEach((i, n) => {
        explained += found[2 * n]! * right[2 * i]! + found[2 * n + 1]! * right[2 * i + 1]!;
      });
      const noise = Math.max(0, leftPower - explained) / Math.max(1, cells - used.length);
      const at = (i: number): Part | null => {
        const n = used.indexOf(i);
        if (n < 0) return null;
        const re = found[2 * n]!;
        const im = found[2 * n + 1]!;
        return { re, im, power: re * re + im * im, sigma: noise / size(i) };
      };
      const bounded = (part: { power: number; sigma: number } | null, against: number): BoundedDb | null => {
        if (part === null) return null;
        const isBound = part.power < 9 * part.sigma;
        return { db: 10 * log10(Math.max(part.power, 9 * part.sigma, 1e-30) / against), isBound };
      };
      const image = at(0);
      const dc = withoutMirror(at(1), image);
      const imageDb = bounded(image, 1);
      const dcDb = bounded(dc, signalPower);
      let gainDb: number | null = null;
      let angleDeg: number | null = null;
      if (image !== null && imageDb !== null && !imageDb.isBound) {
        // (1 + κ)/(1 − κ) = (g + j sin φ)/cos φ with I·√g, (Q cos φ + I sin φ)/√g
        const below = (1 - image.re) * (1 - image.re) + image.im * image.im;
        const re = (1 - image.power) / below;
        const im = (2 * image.im) / below;
        const angle = turnsOf(1, im);
        angleDeg = 360 * angle;
        gainDb = 20 * log10(Math.max(1e-9, re * sineCosine(angle).cosine));
      }
      return {
        image: imageDb,
        generatorImage: isApart ? bounded(at(2), 1) : null,
        gainDb,
        angleDeg,
        dc: dcDb,
        dcDbfs: dc === null || dcDb === null || dcDb.isBound ? null : 10 * log10(dc.power),
      };
    },
  };
}

interface Part {
  re: number;
  im: number;
  power: number;
  sigma: number;
}

/** The capture's conjugate holds the DC's as well: c = dc − κ·dc*. */
function withoutMirror(constant: Part | null, image: Part | null): Part | null {
  if (constant === null || image === null) return constant;
  const re = constant.re + image.re * constant.re + image.im * constant.im;
  const im = constant.im + image.im * constant.re - image.re * constant.im;
  return { re, im, power: re * re + im * im, sigma: constant.sigma };
}

/** Solves the chosen unknowns' complex normal equations by elimination with pivots; null where they are singular. */
function solve(normal: Float64Array, right: Float64Array, used: number[]): Float64Array | null {
  const n = used.length;
  const rows = used.map((i) => {
    const row = new Float64Array(2 * (n + 1));
    used.forEach((j, column) => {
      row[2 * column] = normal[2 * (3 * i + j)]!;
      row[2 * column + 1] = normal[2 * (3 * i + j) + 1]!;
    });
    row[2 * n] = right[2 * i]!;
    row[2 * n + 1] = right[2 * i + 1]!;
    return row;
  });
  for (let c = 0; c < n; c++) {
    let pivot = c;
    const sizeAt = (r: number): number =>
      rows[r]![2 * c]! * rows[r]![2 * c]! + rows[r]![2 * c + 1]! * rows[r]![2 * c + 1]!;
    for (let r = c + 1; r < n; r++) if (sizeAt(r) > sizeAt(pivot)) pivot = r;
    const power = sizeAt(pivot);
    if (power === 0) return null;
    [rows[c], rows[pivot]] = [rows[pivot]!, rows[c]!];
    const top = rows[c]!;
    const pRe = top[2 * c]!;
    const pIm = top[2 * c + 1]!;
    for (let r = 0; r < n; r++) {
      if (r === c) continue;
      const row = rows[r]!;
      const fRe = (row[2 * c]! * pRe + row[2 * c + 1]! * pIm) / power;
      const fIm = (row[2 * c + 1]! * pRe - row[2 * c]! * pIm) / power;
      for (let j = c; j <= n; j++) {
        const tRe = top[2 * j]!;
        const tIm = top[2 * j + 1]!;
        row[2 * j] = row[2 * j]! - fRe * tRe + fIm * tIm;
        row[2 * j + 1] = row[2 * j + 1]! - fRe * tIm - fIm * tRe;
      }
    }
  }
  const found = new Float64Array(2 * n);
  rows.forEach((row, i) => {
    const pRe = row[2 * i]!;
    const pIm = row[2 * i + 1]!;
    const power = pRe * pRe + pIm * pIm;
    found[2 * i] = (row[2 * n]! * pRe + row[2 * n + 1]! * pIm) / power;
    found[2 * i + 1] = (row[2 * n + 1]! * pRe - row[2 * n]! * pIm) / power;
  });
  return found;
}
