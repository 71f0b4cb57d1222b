import { markerRanges, type Marker } from '@/lib/synth';
import { describeMarkers, scanMarks } from '@/server/packs/manifest/describeMarkers';
import { smallDocument } from '../../../helpers/documents';

const marker = (
  at: Marker['at'],
  offsetSamples: number,
  lengthSamples: number,
  symbol: number | null = null,
): Marker => ({
  name: `${at} ${offsetSamples}`,
  at,
  symbol,
  offsetSamples,
  lengthSamples,
});

test('counted by a scan, the marks are those of the signal library', () => {
  const { content } = smallDocument({
    timing: { mode: 'loop', repeats: 5, gapSamples: 7, padSamples: 3 },
    markers: [
      marker('file', 0, 4),
      marker('repeat', -9, 20), // wraps
      marker('symbol', 0, 80), // touching ones join
      marker('symbol', 3, 5, 2),
    ],
  });
  const ranges = markerRanges(content);
  expect(scanMarks(content)).toEqual(ranges.map((first) => ({ count: first.length, first })));
});

test('more marks than can be held are counted, the first of them listed', () => {
  const { content } = smallDocument({
    fftSize: 16,
    prefixSamples: [0],
    symbolCount: 32,
    grid: { rows: [[7, 0, 1, 1, 8, 0]], rowOfSymbol: new Array<number>(32).fill(0) },
    timing: { mode: 'loop', repeats: 40_000, gapSamples: 0, padSamples: 0 },
    markers: [marker('symbol', 0, 1)],
  });
  expect(() => markerRanges(content)).toThrow();
  const [described] = describeMarkers(content);
  expect(described).toMatchObject({ rangeCount: 1_280_000 });
  expect(described!.ranges).toHaveLength(4096);
  expect(described!.ranges[1]).toEqual({ startSample: 16, lengthSamples: 1 });
});
