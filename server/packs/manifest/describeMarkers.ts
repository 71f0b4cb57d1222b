import type { Manifest } from '@/lib/document/manifestSchema';
import { markerBytes, markerRanges, SynthError, type MarkerRange, type WaveformContent } from '@/lib/synth';

const mostListed = 4096;

interface Marks {
  count: number;
  first: MarkerRange[];
}

/** The marks of every marker as they lie in the file, counted without holding them: a long file may have more than memory. */
export function scanMarks(content: WaveformContent): Marks[] {
  const source = markerBytes(content);
  const marks = content.markers.map((): Marks => ({ count: 0, first: [] }));
  const open = content.markers.map(() => -1);
  const close = (marker: number, end: number) => {
    const { first } = marks[marker]!;
    marks[marker]!.count += 1;
    if (first.length < mostListed) first.push({ start: open[marker]!, end });
    open[marker] = -1;
  };
  const block = new Uint8Array(1 << 16);
  let position = 0;
  let before = 0;
  for (let count = source.read(block); count > 0; count = source.read(block)) {
    for (let i = 0; i < count; i++) {
      const now = block[i]!;
      if (now === before) continue;
      for (let marker = 0; marker < marks.length; marker++) {
        const bit = (now >> marker) & 1;
        if (bit === ((before >> marker) & 1)) continue;
        if (bit === 1) open[marker] = position + i;
        else close(marker, position + i);
      }
      before = now;
    }
    position += count;
  }
  open.forEach((start, marker) => start >= 0 && close(marker, position));
  return marks;
}

function marksOf(content: WaveformContent): Marks[] {
  try {
    return markerRanges(content).map((ranges) => ({ count: ranges.length, first: ranges.slice(0, mostListed) }));
  } catch (error) {
    if (error instanceof SynthError && error.code === 'too_large') return scanMarks(content);
    throw error;
  }
}

export function describeMarkers(content: WaveformContent): Manifest['markers'] {
  if (content.markers.length === 0) return [];
  const marks = marksOf(content);
  return content.markers.map((marker, number) => ({
    marker: number,
    name: marker.name,
    at: marker.at,
    symbol: marker.symbol,
    offsetSamples: marker.offsetSamples,
    lengthSamples: marker.lengthSamples,
    rangeCount: marks[number]!.count,
    ranges: marks[number]!.first.map(({ start, end }) => ({ startSample: start, lengthSamples: end - start })),
  }));
}
