import { isFiveSmooth } from '../../fft/transform';
import { exactFraction, fileSamples, fractionToNumber, sampleClock } from '../../numerology';
import type { Ink, WaveformContent } from '../../types';
import { applyChanges } from '../changes';
import { isClockAllowed } from '../limits';
import type { PlainChange } from '../types';
import { spell, spellHz } from '../words';
import { change, lengthWords, type Alternatives, type Case } from './draft';
import { atOtherRate, padWords } from './otherRate';

const SIZE_LEAST = 16;
const SIZE_MOST = 16384;
const CELLS_MOST = 8388608; // 2^23

/** A remedy carries the rows before and after: beyond this many numbers it is not offered. */
const ROW_NUMBERS_MOST = 20000;

/** Sizes tried, the nearest first. */
const TRIES = 6;

/**
 * Other FFT sizes whose clock can be set, at the same spacing: the band is cut or widened at its edges, DC stays where it is, and what is
 * counted in samples (prefixes, overlap, gap, marks, pad) keeps its time. Only where no painted cell is lost and every count stays whole.
 */
export function* fftSizeDrafts(about: Case): Alternatives {
  const { document, bench } = about;
  const { content } = document;
  const size = content.fftSize;
  if (content.grid.rows.reduce((sum, row) => sum + row.length, 0) > ROW_NUMBERS_MOST) return;
  const sizes: number[] = [];
  // doubles leave out what is far off: fractions decide the rest
  const { least, most } = bench.content.sampleClockHz;
  const perPoint = (content.oversampling * content.subcarrierSpacingHz[0]) / content.subcarrierSpacingHz[1];
  const first = Math.max(SIZE_LEAST, Math.floor(least / perPoint) - 1);
  const last = Math.min(SIZE_MOST, Math.ceil(most / perPoint) + 1);
  for (let other = first; other <= last; other++) {
    if (other === size || !isFiveSmooth(other) || other * content.symbolCount > CELLS_MOST) continue;
    const clock = sampleClock({ ...content, fftSize: other });
    if (isClockAllowed(clock, bench.content.sampleClockHz)) sizes.push(other);
  }
  const away = (other: number): number => Math.max(other / size, size / other);
  sizes.sort((a, b) => away(a) - away(b));
  let tries = TRIES;
  for (const other of sizes) {
    const changes = resized(about, other);
    if (!changes) continue;
    if (tries-- === 0) return;
    const hz = fractionToNumber(sampleClock({ ...content, fftSize: other }));
    for (const all of atOtherRate(about, changes, ratio(size, other))) {
      const length = fileSamples(applyChanges(document, all).content);
      yield {
        kind: 'fftSize',
        label: `Use an FFT size of ${spell(other)}: ${spellHz(hz)}`,
        changes: all,
        effect: `${lengthWords(document, length)}${padWords(document, all, size, other)}${payloadWords(content)}`,
      };
    }
  }
}

function ratio(from: number, to: number): [number, number] {
  const { numerator, denominator } = exactFraction(BigInt(from), BigInt(to));
  return [Number(numerator), Number(denominator)];
}

/** An anchored cell's bits follow from its place in the whole grid. */
function payloadWords(content: WaveformContent): string {
  return content.streams.some((stream) => stream.fill === 'anchored') ? ' Anchored payload takes other bits.' : '';
}

function resized({ document }: Case, size: number): PlainChange[] | null {
  const { content } = document;
  const scaled = (value: number): number => (value * size) / content.fftSize;
  const prefixSamples = content.prefixSamples.map(scaled);
  const overlapSamples = scaled(content.overlapSamples);
  const gapSamples = scaled(content.timing.gapSamples);
  if (![...prefixSamples, overlapSamples, gapSamples].every(Number.isInteger)) return null;
  const rows: number[][] = [];
  const more = Math.floor(size / 2) - Math.floor(content.fftSize / 2);
  for (const row of content.grid.rows) {
    const other = resizedRow(row, content.fftSize, size, more, content.tray);
    if (!other) return null;
    rows.push(other);
  }
  const changes = [
    change(document, '/content/fftSize', size),
    change(document, '/content/grid/rows', rows),
    change(document, '/content/prefixSamples', prefixSamples),
  ];
  if (overlapSamples !== content.overlapSamples)
    changes.push(change(document, '/content/overlapSamples', overlapSamples));
  if (gapSamples !== content.timing.gapSamples) {
    changes.push(change(document, '/content/timing/gapSamples', gapSamples));
  }
  const tray = content.tray.map((ink) => countedFrom(ink, more));
  if (tray.some((ink, i) => ink !== content.tray[i])) changes.push(change(document, '/content/tray', tray));
  return changes;
}

/** The row with `more` null cells below (fewer where negative) and as many above as fill it; null where a painted cell would be cut. */
function resizedRow(
  row: readonly number[],
  from: number,
  to: number,
  more: number,
  tray: readonly Ink[],
): number[] | null {
  const isNull = (ink: number): boolean => tray[ink]?.role === 'null';
  const out: number[] = [];
  const put = (length: number, ink: number): void => {
    if (length <= 0) return;
    if (out.at(-1) === ink && out.length > 0) out[out.length - 2]! += length;
    else out.push(length, ink);
  };
  put(more, 0);
  let position = more;
  for (let i = 0; i + 1 < row.length; i += 2) {
    const [length, ink] = [row[i]!, row[i + 1]!];
    const first = Math.max(0, position);
    const end = Math.min(to, position + length);
    if (end - first < length && !isNull(ink)) return null;
    put(end - first, ink);
    position += length;
  }
  put(to - (from + more), 0);
  return out;
}

/** Counters over subcarriers count from the lowest one: they start later by as many as the band grew below. */
function countedFrom(ink: Ink, more: number): Ink {
  if ((ink.role !== 'pilot' && ink.role !== 'tone') || more === 0) return ink;
  if (!ink.value.factors.some((factor) => factor.counter === 'subcarrier')) return ink;
  const factors = ink.value.factors.map((factor) =>
    factor.counter === 'subcarrier' ? { ...factor, start: factor.start - more } : factor,
  );
  return { ...ink, value: { ...ink.value, factors } } as Ink;
}
