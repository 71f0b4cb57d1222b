import type { SampleEngine } from '../engine/types';
import { createTransform } from '../fft/transform';
import { logarithm } from '../math/exponential';
import { turnsOf } from '../math/angle';
import { writeUnitOfTurns } from '../math/turns';
import type { SampleSource } from '../measure/reconstructedPeak';
import { createKnownWaveform, type Cycle } from './cycle';
import { createResampler } from './resample';

/** Where the known waveform was found in a capture. */
export interface FoundFrame {
  /** Place of the capture's sample `templateAt` in the cycle, in base-rate samples (0…period, fractions by interpolation). */
  cyclePlace: number;
  templateAt: number;
  /** Carrier offset in subcarriers, on top of the document's own frequency offset. */
  offsetSubcarriers: number;
  /** Normalised correlation ρ of the part looked for, 0…1, pooled over blocks of one useful part; what noise alone gives is taken off. */
  correlation: number;
  /** ρ that must be reached: 0.3, more where so short a part could reach that by chance (one in a million). */
  needed: number;
  isFound: boolean;
  /** True where chance alone does not explain it: worth reading, since a channel with many paths lowers ρ. */
  isWorthReading: boolean;
  /** Best ρ of each 1/512 of the cycle, for a picture. */
  curve: Float64Array;
  /** True when the waveform does not come back within what is searched. */
  isCut: boolean;
  /** Capture samples of the part that was looked for. */
  templateSamples: number;
}

export const CURVE_POINTS = 512;
const LEAST_CORRELATION = 0.3;
const OFFSET_MOST = 8;
const CHANCE = 1e-6;
const CANDIDATES = 6;
const BLOCKS_MOST = 64;
/** Used cells that the part looked for should hold: enough for ρ = 0.3 to stand clear of chance. */
const CELLS_WANTED = 3000;

interface Candidate {
  power: number;
  lag: number;
  /** Half subcarriers. */
  shift: number;
}

/** ρ² that a Gamma(blocks) sum over `cells` dimensions passes once in `trials`/CHANCE. Source: Laurent and Massart, Ann. Statist. 28, 2000, lemma 1. */
function chancePower(blocks: number, cells: number, trials: number): number {
  const l = logarithm(trials / CHANCE);
  return (blocks + Math.sqrt(2 * blocks * l) + l) / (blocks * cells);
}

/**
 * Looks for a part of the capture in the known waveform: cross-correlation over blocks of one useful part, coherent within a block and
 * summed as powers over the blocks, for carrier offsets of −8…8 subcarriers in halves; the best places are then refined in time and
 * frequency. `source`: the capture with the document's frequency offset turned back; `ratio`: capture samples per base-rate sample,
 * nominal (± 20 ppm); `from`: first capture sample of the part. A generator: each `yield` is the share done, 0…1.
 * Source: Kay, "Fundamentals of statistical signal processing: detection theory", 1998, ch. 7 (unknown delay and frequency); overlap-save.
 */
export function* findFrame(
  source: SampleSource,
  cycle: Cycle,
  ratio: number,
  from: number,
  engine?: SampleEngine,
): Generator<number, FoundFrame> {
  const size = cycle.content.fftSize;
  const known = createKnownWaveform(cycle, engine);
  const blocks = Math.max(
    1,
    Math.min(
      BLOCKS_MOST,
      Math.ceil(CELLS_WANTED / Math.max(1, cycle.usedCount)),
      Math.floor((source.samples - from) / ratio / size),
    ),
  );
  const span = blocks * size;
  const readPart = createPartReader(source, ratio, from, span);
  const template = new Float64Array(2 * span);
  readPart(0, template);

  const segment = 4 * size;
  const transform = createTransform(segment);
  const lags = 3 * size;
  const padded = new Float64Array(2 * segment);
  const spectra: Float64Array[] = [];
  let templateEnergy = 0;
  for (let block = 0; block < blocks; block++) {
    padded.fill(0);
    padded.set(template.subarray(2 * block * size, 2 * (block + 1) * size));
    for (let i = 0; i < 2 * size; i++) templateEnergy += padded[i]! * padded[i]!;
    const spectrum = new Float64Array(2 * segment);
    transform.forward(padded, spectrum);
    spectra.push(spectrum);
  }

  // spectra of the known waveform's segments, one a size apart: a block's segment is a later one of the same list
  const steps = Math.ceil(known.periodSamples / lags);
  const ring: { spectrum: Float64Array; energy: Float64Array }[] = [];
  let ringFirst = 0; // number of the ring's first segment
  const window = new Float64Array(2 * segment);
  known.read(segment, window);
  let windowAt = 0;
  const segmentOf = (number: number): { spectrum: Float64Array; energy: Float64Array } => {
    while (ringFirst + ring.length <= number) {
      const next = ringFirst + ring.length;
      if (windowAt < next) {
        window.copyWithin(0, 2 * size);
        known.read(size, window.subarray(2 * (segment - size)));
        windowAt = next;
      }
      const spectrum = new Float64Array(2 * segment);
      transform.forward(window, spectrum);
      const energy = new Float64Array(lags + 1);
      let sum = 0;
      for (let i = 0; i < size; i++) sum += window[2 * i]! * window[2 * i]! + window[2 * i + 1]! * window[2 * i + 1]!;
      for (let d = 0; d <= lags; d++) {
        energy[d] = sum;
        if (d === lags) break;
        const out = 2 * d;
        const come = 2 * (d + size);
        sum += window[come]! * window[come]! + window[come + 1]! * window[come + 1]!;
        sum -= window[out]! * window[out]! + window[out + 1]! * window[out + 1]!;
      }
      ring.push({ spectrum, energy });
    }
    return ring[number - ringFirst]!;
  };

  const product = new Float64Array(2 * segment);
  const lagsOf = new Float64Array(2 * segment);
  const powers = new Float64Array(lags);
  const energies = new Float64Array(lags);
  const curve = new Float64Array(CURVE_POINTS);
  const candidates: Candidate[] = [];
  const meanEnergy = meanKnownEnergy(cycle, size);
  const shifts = 2 * (2 * OFFSET_MOST + 1) + 1;
  for (let step = 0; step < steps; step++) {
    const first = 3 * step;
    while (ringFirst < first && ring.length > 0) {
      ring.shift();
      ringFirst++;
    }
    ringFirst = Math.max(ringFirst, first);
    energies.fill(0);
    for (let block = 0; block < blocks; block++) {
      const { energy } = segmentOf(first + block);
      for (let d = 0; d < lags; d++) energies[d] = energies[d]! + Math.max(0, energy[d]!);
    }
    const count = Math.min(lags, known.periodSamples - step * lags);
    for (let turn = 0; turn < shifts; turn++) {
      const shift = turn - (shifts - 1) / 2;
      powers.fill(0);
      for (let block = 0; block < blocks; block++) {
        multiplyShifted(segmentOf(first + block).spectrum, spectra[block]!, 2 * shift, segment, product);
        transform.inverse(product, lagsOf);
        for (let d = 0, i = 0; d < lags; d++, i += 2)
          powers[d] = powers[d]! + lagsOf[i]! * lagsOf[i]! + lagsOf[i + 1]! * lagsOf[i + 1]!;
      }
      for (let d = 0; d < count; d++) {
        // Σ|c|² ≤ Σ E_x·E_r; both are spread evenly over the blocks but for gaps, which may not divide by nothing
        const norm = (templateEnergy / blocks) * Math.max(energies[d]!, 0.25 * blocks * meanEnergy);
        const power = norm > 0 ? powers[d]! / (norm * segment * segment) : 0;
        const lag = step * lags + d;
        const point = Math.min(CURVE_POINTS - 1, Math.floor((lag * CURVE_POINTS) / known.periodSamples));
        if (power > curve[point]!) curve[point] = power;
        keepBest(candidates, power, lag, shift, known.periodSamples);
      }
      yield ((step + (turn + 1) / shifts) / steps) * 0.95;
    }
  }

  const trials = known.periodSamples * shifts;
  const chance = chancePower(blocks, Math.max(1, Math.min(size, cycle.usedCount)), trials);
  const floor = 1 / Math.max(2, cycle.usedCount);
  const unbiased = (power: number): number => Math.sqrt(Math.max(0, (power - floor) / (1 - floor)));
  let best: { power: number; cyclePlace: number; offset: number } | null = null;
  for (const candidate of candidates) {
    const refined = refine(candidate, known, readPart, blocks, size, meanEnergy);
    if (best === null || refined.power > best.power) best = refined;
    yield 0.97;
  }
  for (let i = 0; i < CURVE_POINTS; i++) curve[i] = unbiased(curve[i]!);
  const correlation = best === null ? 0 : Math.min(1, unbiased(best.power));
  const needed = Math.max(LEAST_CORRELATION, Math.min(0.9, unbiased(chance)));
  return {
    cyclePlace: best?.cyclePlace ?? 0,
    templateAt: from,
    offsetSubcarriers: best?.offset ?? 0,
    correlation,
    needed,
    isFound: best !== null && correlation >= needed,
    isWorthReading: best !== null && correlation >= Math.min(0.9, unbiased(chance)),
    curve,
    isCut: known.isCut,
    templateSamples: Math.floor(span * ratio),
  };
}

/** Reads the part at the base rate, moved by a fraction of a base-rate sample. */
function createPartReader(
  source: SampleSource,
  ratio: number,
  from: number,
  span: number,
): (moved: number, out: Float64Array) => void {
  // a faster capture is limited to the base rate's band, a slower one to its own
  const cutoff = 0.5 / Math.max(1, ratio);
  const resampler = createResampler(source, { passTurns: 0.9 * cutoff, stopTurns: 1.1 * cutoff, mostTaps: 16384 });
  return (moved, out) => {
    if (ratio === 1 && moved === 0) source.read(from, span, out);
    else resampler.read(from + moved * ratio, ratio, span, out);
  };
}

/** Mean energy of the known waveform over `size` samples, from its cells: a bound for the quiet places. */
function meanKnownEnergy(cycle: Cycle, size: number): number {
  const values = new Float64Array(2 * size);
  const symbols = Math.min(cycle.symbols, 16);
  let sum = 0;
  for (let i = 0; i < symbols; i++) {
    const symbol = Math.floor((i * cycle.symbols) / symbols);
    const { symbolCount } = cycle.layout;
    cycle.values.write(Math.floor(symbol / symbolCount), symbol % symbolCount, values);
    for (const value of values) sum += value * value;
  }
  return sum / symbols;
}

/** product[i] = known[i] · conj(part[i + bins]): the part moved down by `bins`. */
function multiplyShifted(
  known: Float64Array,
  part: Float64Array,
  bins: number,
  size: number,
  product: Float64Array,
): void {
  let from = ((bins % size) + size) % size;
  for (let i = 0; i < 2 * size; i += 2) {
    const pRe = part[2 * from]!;
    const pIm = part[2 * from + 1]!;
    const kRe = known[i]!;
    const kIm = known[i + 1]!;
    product[i] = kRe * pRe + kIm * pIm;
    product[i + 1] = kIm * pRe - kRe * pIm;
    if (++from === size) from = 0;
  }
}

/** Keeps the few best places, neighbours of a better one left out. */
function keepBest(list: Candidate[], power: number, lag: number, shift: number, period: number): void {
  if (list.length === CANDIDATES && power <= list[CANDIDATES - 1]!.power) return;
  for (let i = 0; i < list.length; i++) {
    const other = list[i]!;
    const apart = Math.abs(other.lag - lag);
    if (Math.min(apart, period - apart) > 2 || Math.abs(other.shift - shift) > 1) continue;
    if (other.power >= power) return;
    list.splice(i, 1);
    break;
  }
  let place = list.length;
  while (place > 0 && list[place - 1]!.power < power) place--;
  list.splice(place, 0, { power, lag, shift });
  if (list.length > CANDIDATES) list.pop();
}

const MOVES = [-0.75, -0.5, -0.25, 0, 0.25, 0.5, 0.75];

/** A candidate's place to a tenth of a sample and its offset to a hundredth of a subcarrier or so, by a grid and parabolas through its best. */
function refine(
  candidate: Candidate,
  known: ReturnType<typeof createKnownWaveform>,
  readPart: (moved: number, out: Float64Array) => void,
  blocks: number,
  size: number,
  meanEnergy: number,
): { power: number; cyclePlace: number; offset: number } {
  const span = blocks * size;
  const reference = new Float64Array(2 * span);
  known.rewind();
  const skip = new Float64Array(2 * Math.min(65536, Math.max(1, candidate.lag)));
  for (let left = candidate.lag; left > 0;) {
    const part = Math.min(left, skip.length / 2);
    known.read(part, skip);
    left -= part;
  }
  known.read(span, reference);
  let referenceEnergy = 0;
  for (const value of reference) referenceEnergy += value * value;
  const part = new Float64Array(2 * span);
  const product = new Float64Array(2 * span);
  const powerAt = (offset: number): number => {
    let power = 0;
    const unit = new Float64Array(2);
    for (let block = 0; block < blocks; block++) {
      let re = 0;
      let im = 0;
      // in eighths of a block the phase of the offset hardly turns: one rotation each
      for (let piece = 0; piece < PIECES; piece++) {
        const first = block * size + Math.floor((piece * size) / PIECES);
        const end = block * size + Math.floor(((piece + 1) * size) / PIECES);
        const at = 2 * (block * PIECES + piece);
        writeUnitOfTurns((-offset * ((first + end - 1) / 2)) / size, 0, unit, 0);
        re += sums[at]! * unit[0]! - sums[at + 1]! * unit[1]!;
        im += sums[at]! * unit[1]! + sums[at + 1]! * unit[0]!;
      }
      power += re * re + im * im;
    }
    return power;
  };
  const sums = new Float64Array(2 * blocks * PIECES);
  const results: { power: number; offset: number }[] = [];
  const coarse = candidate.shift / 2;
  for (const moved of MOVES) {
    readPart(moved, part);
    let energy = 0;
    for (const value of part) energy += value * value;
    multiplyConjugate(part, reference, coarse / size, product);
    for (let block = 0; block < blocks; block++)
      for (let piece = 0; piece < PIECES; piece++) {
        const first = block * size + Math.floor((piece * size) / PIECES);
        const end = block * size + Math.floor(((piece + 1) * size) / PIECES);
        let re = 0;
        let im = 0;
        for (let i = first; i < end; i++) {
          re += product[2 * i]!;
          im += product[2 * i + 1]!;
        }
        sums[2 * (block * PIECES + piece)] = re;
        sums[2 * (block * PIECES + piece) + 1] = im;
      }
    const norm = (energy / blocks) * Math.max(referenceEnergy, 0.25 * blocks * meanEnergy);
    let best = { power: 0, offset: 0 };
    for (let i = -8; i <= 8; i++) {
      const power = powerAt(i / 16);
      if (power > best.power) best = { power, offset: i / 16 };
    }
    const offset = best.offset + vertex(powerAt(best.offset - 1 / 16), best.power, powerAt(best.offset + 1 / 16)) / 16;
    results.push({
      power: norm > 0 ? powerAt(offset) / norm : 0,
      offset: coarse + offset + between(sums, blocks, offset),
    });
  }
  let best = 0;
  results.forEach((result, i) => {
    if (result.power > results[best]!.power) best = i;
  });
  const left = results[Math.max(0, best - 1)]!.power;
  const right = results[Math.min(MOVES.length - 1, best + 1)]!.power;
  const isInside = best > 0 && best < MOVES.length - 1;
  const moved = MOVES[best]! + (isInside ? 0.25 * vertex(left, results[best]!.power, right) : 0);
  return { power: results[best]!.power, cyclePlace: candidate.lag - moved, offset: results[best]!.offset };
}

const PIECES = 8;

/** Where a parabola through three even places has its top, −½…½. */
function vertex(left: number, middle: number, right: number): number {
  const bend = left - 2 * middle + right;
  return bend >= 0 ? 0 : Math.max(-0.5, Math.min(0.5, (0.5 * (left - right)) / bend));
}

/** The phase's progress from block to block that is left at `offset`, in subcarriers; 0 for one block. */
function between(sums: Float64Array, blocks: number, offset: number): number {
  const unit = new Float64Array(2);
  let re = 0;
  let im = 0;
  let lastRe = 0;
  let lastIm = 0;
  for (let block = 0; block < blocks; block++) {
    let bRe = 0;
    let bIm = 0;
    for (let piece = 0; piece < PIECES; piece++) {
      const at = 2 * (block * PIECES + piece);
      writeUnitOfTurns(-offset * (block + (piece + 0.5) / PIECES), 0, unit, 0);
      bRe += sums[at]! * unit[0]! - sums[at + 1]! * unit[1]!;
      bIm += sums[at]! * unit[1]! + sums[at + 1]! * unit[0]!;
    }
    if (block > 0) {
      re += bRe * lastRe + bIm * lastIm;
      im += bIm * lastRe - bRe * lastIm;
    }
    lastRe = bRe;
    lastIm = bIm;
  }
  return turnsOf(re, im);
}

/** product[i] = part[i] · conj(reference[i]) · e^{−j2π·turns·i}. */
function multiplyConjugate(part: Float64Array, reference: Float64Array, turns: number, product: Float64Array): void {
  const unit = new Float64Array(2);
  for (let i = 0; i < part.length; i += 2) {
    writeUnitOfTurns((-turns * i) / 2, 0, unit, 0);
    const re = part[i]! * reference[i]! + part[i + 1]! * reference[i + 1]!;
    const im = part[i + 1]! * reference[i]! - part[i]! * reference[i + 1]!;
    product[i] = re * unit[0]! - im * unit[1]!;
    product[i + 1] = re * unit[1]! + im * unit[0]!;
  }
}
