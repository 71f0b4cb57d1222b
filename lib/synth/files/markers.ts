import { demand, SynthError } from '../errors';
import { frameLayout } from '../synthesize/layout';
import type { FrameLayout } from '../synthesize/types';
import type { Marker, WaveformContent } from '../types';

const RANGES_MOST = 1048576;

/** Output samples start…end−1 of the file in which a marker is on. */
export interface MarkerRange {
  start: number;
  end: number;
}

interface RangeCursor {
  /** The next joined range, null behind the last. */
  next(): MarkerRange | null;
}

/** The marks of one marker as written, unjoined: how many, and where mark i begins (from the file's first sample). */
function marksOf(marker: Marker, layout: FrameLayout): { count: number; startOf: (i: number) => number } {
  const offset = marker.offsetSamples;
  const { repeats, repeatSamples, symbolStarts, symbolCount } = layout;
  if (marker.at === 'file') return { count: 1, startOf: () => offset };
  if (marker.at === 'repeat') return { count: repeats, startOf: (i) => i * repeatSamples + offset };
  if (marker.symbol !== null) {
    const place = symbolStarts[marker.symbol];
    if (place === undefined)
      throw new SynthError('bad_content', `Marker ${marker.name} names a symbol that is not there.`);
    return { count: repeats, startOf: (i) => i * repeatSamples + place + offset };
  }
  return {
    count: repeats * symbolCount,
    startOf: (i) => Math.floor(i / symbolCount) * repeatSamples + symbolStarts[i % symbolCount]! + offset,
  };
}

function floorMod(value: number, modulus: number): number {
  const rest = value % modulus;
  return rest < 0 ? rest + modulus : rest;
}

/** Ranges of one marker in ascending order, made one by one: a long file may have more of them than memory. */
function createRangeCursor(marker: Marker, layout: FrameLayout): RangeCursor {
  const { count, startOf } = marksOf(marker, layout);
  const { samples } = layout;
  const length = Math.min(marker.lengthSamples, samples);
  const turnOf = (i: number): number => Math.floor(startOf(i) / samples);
  if (layout.mode === 'burst') {
    demand(
      startOf(0) >= 0 && startOf(count - 1) + marker.lengthSamples <= samples,
      'marker_outside',
      `Marker ${marker.name} reaches past the end of the burst.`,
    );
  }
  // starts ascend over less than one file length, so taken modulo the file they are ascending but for one break
  let first = 0;
  if (turnOf(0) !== turnOf(count - 1)) {
    let low = 0;
    let high = count - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (turnOf(middle) === turnOf(0)) low = middle;
      else high = middle;
    }
    first = high;
  }
  const last = floorMod(startOf((first + count - 1) % count), samples);
  let taken = 0;
  let pending: MarkerRange | null = last + length > samples ? { start: 0, end: last + length - samples } : null;
  return {
    next() {
      while (taken < count) {
        const start = floorMod(startOf((first + taken) % count), samples);
        taken++;
        const end = Math.min(start + length, samples);
        if (pending !== null && start <= pending.end) pending.end = Math.max(pending.end, end);
        else if (pending === null) pending = { start, end };
        else {
          const done: MarkerRange = pending;
          pending = { start, end };
          return done;
        }
      }
      const done = pending;
      pending = null;
      return done;
    },
  };
}

/**
 * For each marker of the content, its ranges: ascending, joined where they touch or overlap, in output samples of the file.
 * Throws SynthError `marker_outside` when a mark leaves a burst, `too_large` beyond 2^20 ranges.
 */
export function markerRanges(content: WaveformContent): MarkerRange[][] {
  const layout = frameLayout(content);
  return content.markers.map((marker) => {
    const cursor = createRangeCursor(marker, layout);
    const ranges: MarkerRange[] = [];
    for (let range = cursor.next(); range !== null; range = cursor.next()) {
      demand(ranges.length < RANGES_MOST, 'too_large', `Marker ${marker.name} has more than 2^20 ranges.`);
      ranges.push(range);
    }
    return ranges;
  });
}

/** The marker file, block by block: one byte a sample, bit m on where marker m is. */
export interface MarkerBytes {
  readonly samples: number;
  /** Fills `out` with the next bytes; returns how many, 0 at the end. */
  read(out: Uint8Array): number;
  /** What is read next are the bytes from sample `sample` on, 0…samples. Upwards is fastest. */
  seek(sample: number): void;
  rewind(): void;
}

/** The marker bytes of a content's file, in low memory. Throws SynthError `marker_outside` when a mark leaves a burst. */
export function markerBytes(content: WaveformContent): MarkerBytes {
  const layout = frameLayout(content);
  let cursors: RangeCursor[] = [];
  let current: (MarkerRange | null)[] = [];
  let position = 0;
  function rewind(): void {
    cursors = content.markers.map((marker) => createRangeCursor(marker, layout));
    current = cursors.map((cursor) => cursor.next());
    position = 0;
  }
  rewind();
  return {
    samples: layout.samples,
    rewind,
    seek(sample) {
      if (sample < position) rewind();
      position = sample; // ranges that end before it are passed over by the next read
    },
    read(out) {
      const count = Math.min(out.length, layout.samples - position);
      const end = position + count;
      out.fill(0, 0, count);
      for (let m = 0; m < cursors.length; m++) {
        for (let range = current[m] ?? null; range !== null && range.start < end;) {
          const from = Math.max(range.start, position) - position;
          const to = Math.min(range.end, end) - position;
          for (let i = from; i < to; i++) out[i]! |= 1 << m;
          if (range.end > end) break;
          range = cursors[m]!.next();
          current[m] = range;
        }
      }
      position = end;
      return count;
    },
  };
}
