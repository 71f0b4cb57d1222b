import fc from 'fast-check';
import { frameLayout, markerBytes, markerRanges, type Marker, type WaveformContent } from '@/lib/synth';
import { arbitraryContent } from '../../../../helpers/arbitraryContent';
import { smallContent } from '../../../../helpers/content';

const mark = (changes: Partial<Marker>): Marker => ({
  name: 'm',
  at: 'file',
  symbol: null,
  offsetSamples: 0,
  lengthSamples: 4,
  ...changes,
});

/** 64-sample symbols with prefix 16, two a repeat, three repeats, 10 of gap: 170 a repeat, 510 in all. */
function content(marker: Marker, mode: 'loop' | 'burst' = 'loop'): WaveformContent {
  return smallContent({
    symbolCount: 2,
    prefixSamples: [16],
    timing: { mode, repeats: 3, gapSamples: 10, padSamples: 0 },
    grid: { rows: [[64, 0]], rowOfSymbol: [0, 0] },
    markers: [marker],
  });
}

/** Every sample of every mark written down one by one. */
function plainBytes(contentOf: WaveformContent): Uint8Array {
  const layout = frameLayout(contentOf);
  const bytes = new Uint8Array(layout.samples);
  contentOf.markers.forEach((marker, m) => {
    for (let r = 0; r < (marker.at === 'file' ? 1 : layout.repeats); r++) {
      const starts =
        marker.at !== 'symbol'
          ? [0]
          : marker.symbol === null
            ? [...layout.symbolStarts]
            : [layout.symbolStarts[marker.symbol]!];
      for (const start of starts) {
        for (let i = 0; i < marker.lengthSamples; i++) {
          const at = r * layout.repeatSamples + start + marker.offsetSamples + i;
          bytes[((at % layout.samples) + layout.samples) % layout.samples]! |= 1 << m;
        }
      }
    }
  });
  return bytes;
}

describe('markers', () => {
  it('stand at file, repeats and symbols', () => {
    expect(markerRanges(content(mark({ offsetSamples: 5 })))).toEqual([[{ start: 5, end: 9 }]]);
    expect(markerRanges(content(mark({ at: 'repeat' })))[0]!.map(({ start }) => start)).toEqual([0, 170, 340]);
    expect(markerRanges(content(mark({ at: 'symbol', symbol: 1 })))[0]!.map(({ start }) => start)).toEqual([
      80, 250, 420,
    ]);
    expect(markerRanges(content(mark({ at: 'symbol' })))[0]!.map(({ start }) => start)).toEqual([
      0, 80, 170, 250, 340, 420,
    ]);
  });

  it('wrap past either end of a loop and join', () => {
    expect(markerRanges(content(mark({ offsetSamples: -3, lengthSamples: 5 })))).toEqual([
      [
        { start: 0, end: 2 },
        { start: 507, end: 510 },
      ],
    ]);
    expect(markerRanges(content(mark({ offsetSamples: 1000, lengthSamples: 9999 })))).toEqual([
      [{ start: 0, end: 510 }],
    ]);
    expect(markerRanges(content(mark({ at: 'repeat', lengthSamples: 170 })))).toEqual([[{ start: 0, end: 510 }]]);
    expect(markerRanges(content(mark({ at: 'repeat', offsetSamples: -2, lengthSamples: 3 })))[0]).toEqual([
      { start: 0, end: 1 },
      { start: 168, end: 171 },
      { start: 338, end: 341 },
      { start: 508, end: 510 },
    ]);
  });

  it('are refused past either end of a burst', () => {
    for (const changes of [{ offsetSamples: -1 }, { offsetSamples: 508 }]) {
      expect(() => markerRanges(content(mark(changes), 'burst'))).toThrow(
        expect.objectContaining({ code: 'marker_outside' }),
      );
      expect(() => markerBytes(content(mark(changes), 'burst'))).toThrow(
        expect.objectContaining({ code: 'marker_outside' }),
      );
    }
    expect(markerRanges(content(mark({ offsetSamples: 506 }), 'burst'))).toEqual([[{ start: 506, end: 510 }]]);
  });

  it('give the bytes of every mark, however they are cut, and the ranges of those bytes', () => {
    fc.assert(
      fc.property(
        arbitraryContent({ cellsMost: 512, samplesMost: 8000 }),
        fc.integer({ min: 1, max: 900 }),
        (generated, cut) => {
          const wanted = plainBytes(generated);
          const reader = markerBytes(generated);
          const found = new Uint8Array(wanted.length).fill(0xaa);
          for (let at = 0; at < found.length;) at += reader.read(found.subarray(at, at + cut));
          expect(Buffer.from(found).equals(Buffer.from(wanted))).toBe(true);
          markerRanges(generated).forEach((ranges, m) => {
            const bits = new Uint8Array(wanted.length);
            let end = -1;
            for (const range of ranges) {
              expect(range.start).toBeGreaterThan(end); // joined: never touching
              bits.fill(1, range.start, range.end);
              end = range.end;
            }
            wanted.forEach((byte, i) => {
              if (bits[i] !== ((byte >> m) & 1)) throw new Error(`marker ${m} differs at ${i}`);
            });
          });
        },
      ),
      { numRuns: 150 },
    );
  });
});
