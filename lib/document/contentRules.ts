import type { z } from 'zod';
import type { Marker, WaveformContent } from '@/lib/synth/index';
import { counterProblems } from './counterRules';
import { gridProblems } from './gridRules';
import { customIssue, LoopIssues } from './issues';

const mostCells = 2 ** 23;
const mostFileSamples = 2 ** 33;
const mostSpacingHz = 1_000_000_000n;

type Add = (path: PropertyKey[], message: string) => void;

function isFiveSmooth(size: number): boolean {
  for (const prime of [2, 3, 5]) while (size % prime === 0) size /= prime;
  return size === 1;
}

function nearestSizes(size: number): string {
  let below = size;
  while (below > 16 && !isFiveSmooth(below)) below -= 1;
  let above = size;
  while (!isFiveSmooth(above)) above += 1;
  return above > 16384 ? `${below} is the nearest` : `${below} and ${above} are the nearest`;
}

/** Whether |value| ≤ numerator/denominator, exactly: a double is a whole number over a power of two. */
function isAtMost(value: number, numerator: bigint, denominator: bigint): boolean {
  let scaled = Math.abs(value);
  let halvings = 0n;
  while (!Number.isInteger(scaled)) {
    scaled *= 2;
    halvings += 1n;
  }
  return BigInt(scaled) * denominator <= numerator << halvings;
}

function numerologyProblems(content: WaveformContent, add: Add): void {
  const { fftSize, symbolCount, prefixSamples, overlapSamples, oversampling } = content;
  if (!isFiveSmooth(fftSize)) {
    add(['fftSize'], `must have no prime factors but 2, 3 and 5: ${nearestSizes(fftSize)}`);
  }
  if (fftSize * symbolCount > mostCells) {
    const most = Math.floor(mostCells / fftSize);
    add(['symbolCount'], `must be at most ${most} with ${fftSize} subcarriers: a grid has at most 2^23 cells`);
  }
  const [numerator, denominator] = content.subcarrierSpacingHz.map(BigInt) as [bigint, bigint];
  if (numerator > mostSpacingHz * denominator) add(['subcarrierSpacingHz'], 'must be at most 1 GHz');
  if (prefixSamples.length > symbolCount) {
    add(
      ['prefixSamples'],
      `must have at most one entry for each of ${symbolCount} symbols, not ${prefixSamples.length}`,
    );
  }
  prefixSamples.forEach((prefix, at) => {
    if (prefix > fftSize) add(['prefixSamples', at], `must be at most the FFT size, ${fftSize}`);
  });
  const shortest = prefixSamples.reduce((least, prefix) => Math.min(least, prefix), fftSize);
  if (overlapSamples > shortest) add(['overlapSamples'], `must be at most the shortest prefix, ${shortest}`);
  const clock = BigInt(fftSize * oversampling) * numerator;
  if (!isAtMost(content.frequencyOffsetHz, clock, 2n * denominator)) {
    const halfHz = (fftSize * oversampling * content.subcarrierSpacingHz[0]) / content.subcarrierSpacingHz[1] / 2;
    add(['frequencyOffsetHz'], `must be within half the sample clock, ±${halfHz} Hz`);
  }
}

interface Lengths {
  symbolStarts: (symbol: number) => number;
  repeatSamples: number;
  fileSamples: number;
}

/** Output samples: where symbols start in a repeat, one repeat with its gap, and the whole file. All below 2^53. */
function lengthsOf(content: WaveformContent): Lengths {
  const { fftSize, symbolCount, prefixSamples, oversampling, timing } = content;
  const period = prefixSamples.length;
  const sums = [0];
  for (const prefix of prefixSamples) sums.push(sums.at(-1)! + prefix);
  const symbolStarts = (symbol: number): number => {
    const prefixes = Math.floor(symbol / period) * sums[period]! + sums[symbol % period]!;
    return (prefixes + symbol * fftSize) * oversampling;
  };
  const repeatSamples = symbolStarts(symbolCount) + timing.gapSamples * oversampling;
  const tail = timing.mode === 'burst' ? content.overlapSamples * oversampling : 0;
  return { symbolStarts, repeatSamples, fileSamples: timing.repeats * repeatSamples + timing.padSamples + tail };
}

function markerProblems(content: WaveformContent, lengths: Lengths, add: Add): void {
  content.markers.forEach((marker, at) => {
    if (marker.symbol !== null && marker.symbol >= content.symbolCount) {
      add(['markers', at, 'symbol'], `must be a symbol of the grid, 0 to ${content.symbolCount - 1}`);
    } else if (content.timing.mode === 'burst') {
      const [first, last] = markedEnds(content, marker, lengths);
      if (first < 0)
        add(['markers', at, 'offsetSamples'], `must not start ${-first} samples before a burst's first sample`);
      const past = last + marker.lengthSamples - lengths.fileSamples;
      if (past > 0) add(['markers', at, 'lengthSamples'], `must not end ${past} samples past a burst's last sample`);
    }
  });
}

/** Where a marker's first and last mark start in the file. */
function markedEnds(content: WaveformContent, marker: Marker, lengths: Lengths): [number, number] {
  if (marker.at === 'file') return [marker.offsetSamples, marker.offsetSamples];
  const lastRepeat = (content.timing.repeats - 1) * lengths.repeatSamples;
  const isAtSymbol = marker.at === 'symbol';
  const firstSymbol = isAtSymbol ? (marker.symbol ?? 0) : 0;
  const lastSymbol = isAtSymbol ? (marker.symbol ?? content.symbolCount - 1) : 0;
  return [
    lengths.symbolStarts(firstSymbol) + marker.offsetSamples,
    lastRepeat + lengths.symbolStarts(lastSymbol) + marker.offsetSamples,
  ];
}

function trayProblems(content: WaveformContent, add: Add): void {
  const { tray, streams } = content;
  tray.forEach((ink, at) => {
    if (ink.inkId !== `k${at}`) add(['tray', at, 'inkId'], `must be "k${at}", its place in the tray`);
    if (at === 0 && ink.role !== 'null') add(['tray', 0, 'role'], 'must be "null": ink 0 is the bare paper');
    if (ink.role === 'data' && !streams.some(({ streamId }) => streamId === ink.value.streamId)) {
      const known = streams.length === 0 ? 'there are no streams' : `there are s0 to s${streams.length - 1}`;
      add(['tray', at, 'value', 'streamId'], `must be a stream of this waveform: ${known}`);
    }
  });
  streams.forEach(({ streamId }, at) => {
    if (streamId !== `s${at}`) add(['streams', at, 'streamId'], `must be "s${at}", its place in the list`);
  });
}

/** The rules across the fields of a content whose fields are right one by one. Paths start in the content. */
export function contentProblems(content: WaveformContent): z.core.$ZodRawIssue[] {
  const found: z.core.$ZodRawIssue[] = [];
  const loop = new LoopIssues();
  const add: Add = (path, message) => loop.add(path, message);
  numerologyProblems(content, add);
  trayProblems(content, add);
  const gridIssues = new LoopIssues();
  gridProblems(content.grid, content.fftSize, content.symbolCount, content.tray.length, gridIssues);
  const lengths = lengthsOf(content);
  if (lengths.fileSamples > mostFileSamples) {
    const text = `makes a file of ${lengths.fileSamples} samples; at most 2^33 (${mostFileSamples}) are possible`;
    found.push(customIssue(['timing'], text, undefined, { code: 'too_large' }));
  }
  if (loop.isEmpty) markerProblems(content, lengths, add);
  if (loop.isEmpty && gridIssues.isEmpty) counterProblems(content, add);
  loop.flush(found);
  gridIssues.flush(found, ['grid']);
  return found;
}
