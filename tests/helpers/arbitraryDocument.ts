import fc from 'fast-check';
import { bitMapsOf, constellations } from '@/lib/document/inkSchema';
import { emptyDocument } from '@/lib/document/newDocument';
import { canonicalGrid } from '@/lib/document/runs';
import { encodeBase64 } from '@/lib/document/base64';
import type { Constellation, Ink, PayloadSource, RunGrid, Sequence, WaveformDocument } from '@/lib/synth/index';

const isCoprime = (a: number, b: number): boolean => (b === 0 ? a === 1 : isCoprime(b, a % b));
const number = (min: number, max: number) => fc.double({ min, max, noNaN: true }).map((value) => value + 0); // −0 to 0

const name = fc
  .string({ unit: 'grapheme', minLength: 1, maxLength: 12 })
  .map((text) => text.normalize('NFC').replace(/\p{Cc}/gu, '·'));

const register = fc
  .record({ stages: fc.integer({ min: 2, max: 31 }), inverted: fc.boolean(), seedRatio: number(0, 1) })
  .chain(({ stages, inverted, seedRatio }) =>
    fc.uniqueArray(fc.integer({ min: 1, max: stages - 1 }), { maxLength: 7 }).map((taps) => ({
      kind: 'pn' as const,
      stages,
      taps: [...taps.sort((a, b) => a - b), stages],
      seed: 1 + Math.floor(seedRatio * (2 ** stages - 2)),
      inverted,
    })),
  );

const cInit = fc.integer({ min: 0, max: 2 ** 31 - 1 });
const count = fc.integer({ min: 1, max: 2 ** 20 });

const sequence: fc.Arbitrary<Sequence> = fc.oneof(
  fc.constantFrom<Sequence>({ kind: 'constant' }, { kind: 'alternating' }),
  register,
  fc.record({ kind: fc.constant('gold' as const), cInit, points: fc.constantFrom('bpsk' as const, 'qpsk' as const) }),
  fc
    .record({ length: fc.integer({ min: 2, max: 65536 }), root: fc.nat(), shift: fc.nat() })
    .map(({ length, root, shift }) => ({ length, root: 1 + (root % (length - 1)), shift: shift % length }))
    .filter(({ length, root }) => isCoprime(length, root))
    .map((rest) => ({ kind: 'zadoffChu' as const, ...rest })),
  fc.record({ kind: fc.constantFrom('newman' as const, 'schroeder' as const), count }),
  fc.record({
    kind: fc.constant('listed' as const),
    points: fc.array(fc.tuple(number(-100, 100), number(-100, 100)), { minLength: 1, maxLength: 8 }),
  }),
);

const uploaded = fc
  .record({ bytes: fc.uint8Array({ minLength: 1, maxLength: 20 }), unused: fc.nat(7), name })
  .map((parts) => {
    const bytes = parts.bytes.slice();
    bytes[bytes.length - 1]! &= 0xff << parts.unused;
    return {
      kind: 'uploaded' as const,
      name: parts.name,
      bitCount: 8 * bytes.length - parts.unused,
      base64: encodeBase64(bytes),
    };
  });

const source: fc.Arbitrary<PayloadSource> = fc.oneof(
  register,
  fc.record({ kind: fc.constant('gold' as const), cInit }),
  fc.constantFrom<PayloadSource>({ kind: 'zeros' }, { kind: 'ones' }, { kind: 'pattern', bits: '0110' }),
  uploaded,
);

const factor = fc.record({
  sequence,
  counter: fc.constantFrom('cell' as const, 'symbolCell' as const, 'subcarrier' as const, 'symbol' as const),
  start: fc.integer({ min: 0, max: 2 ** 31 - 1 }),
});
const toneFactor = fc.record({
  sequence,
  counter: fc.constantFrom('symbolCell' as const, 'subcarrier' as const),
  start: fc.nat(),
});
const powerDb = number(-60, 20);

function inkOf(streamCount: number): fc.Arbitrary<Ink> {
  const common = { inkId: fc.constant(''), name };
  const choices: fc.Arbitrary<Ink>[] = [
    fc.record({ ...common, role: fc.constant('null' as const), powerDb: fc.constant(0), value: fc.constant(null) }),
    fc.record({ ...common, role: fc.constant('reserved' as const), powerDb, value: fc.constant(null) }),
    fc.record({
      ...common,
      role: fc.constant('pilot' as const),
      powerDb,
      value: fc.record({ factors: fc.array(factor, { minLength: 1, maxLength: 3 }) }),
    }),
    fc.record({
      ...common,
      role: fc.constant('tone' as const),
      powerDb,
      value: fc.record({
        factors: fc.array(toneFactor, { maxLength: 3 }),
        phaseDeg: number(-360, 360),
        continuous: fc.boolean(),
      }),
    }),
  ];
  const value = fc
    .tuple(fc.constantFrom<Constellation>(...constellations), fc.nat(), fc.nat(Math.max(0, streamCount - 1)))
    .map(([constellation, map, stream]) => {
      const maps = bitMapsOf(constellation);
      return { constellation, bitMap: maps[map % maps.length]!, streamId: `s${stream}` };
    });
  if (streamCount > 0) choices.push(fc.record({ ...common, role: fc.constant('data' as const), powerDb, value }));
  return fc.oneof(...choices);
}

function gridOf(fftSize: number, symbolCount: number, inkCount: number): fc.Arbitrary<RunGrid> {
  const row = fc
    .array(fc.tuple(fc.integer({ min: 1, max: fftSize }), fc.nat(inkCount - 1)), { maxLength: 12 })
    .map((runs) => {
      const cut: number[] = [];
      let left = fftSize;
      for (const [length, ink] of runs) {
        const fitting = Math.min(length, left);
        cut.push(fitting, ink);
        left -= fitting;
      }
      return [...cut, left, 0];
    });
  const rows = fc.array(row, { minLength: 1, maxLength: 4 });
  return fc
    .tuple(rows, fc.array(fc.nat(3), { minLength: symbolCount, maxLength: symbolCount }))
    .map(([all, places]) => canonicalGrid({ rows: all, rowOfSymbol: places.map((place) => place % all.length) }));
}

/** Right documents of every kind that the schema knows, at most 2^12 cells. */
export const arbitraryDocument: fc.Arbitrary<WaveformDocument> = fc
  .record({
    fftSize: fc.constantFrom(16, 18, 20, 24, 25, 27, 45, 64, 75, 120, 125, 128),
    symbolCount: fc.integer({ min: 1, max: 32 }),
    oversampling: fc.integer({ min: 1, max: 16 }),
    streams: fc.array(
      fc.record({
        streamId: fc.constant(''),
        name,
        source,
        fill: fc.constantFrom('running' as const, 'anchored' as const),
        acrossRepeats: fc.constantFrom('restart' as const, 'continue' as const),
      }),
      { maxLength: 8 },
    ),
    spacing: fc.constantFrom<[number, number]>([15000, 1], [3125000, 7], [1, 3], [1e9, 1]),
    offsetRatio: number(-0.5, 0.5),
    inkCount: fc.integer({ min: 0, max: 6 }),
    timing: fc.record({
      mode: fc.constantFrom('loop' as const, 'burst' as const),
      repeats: fc.integer({ min: 1, max: 9 }),
      gapSamples: fc.nat(100),
      padSamples: fc.nat(100),
    }),
    headroomDb: number(0, 60),
    title: name,
  })
  .chain((parts) =>
    fc
      .record({
        tray: fc.array(inkOf(parts.streams.length), { minLength: parts.inkCount, maxLength: parts.inkCount }),
        grid: gridOf(parts.fftSize, parts.symbolCount, parts.inkCount + 1),
        prefixSamples: fc.array(fc.nat(parts.fftSize), { minLength: 1, maxLength: parts.symbolCount }),
        overlapRatio: number(0, 1),
      })
      .map(({ tray, grid, prefixSamples, overlapRatio }) => {
        const bare: Ink = { inkId: 'k0', name: 'Null', role: 'null', powerDb: 0, value: null };
        const [numerator, denominator] = parts.spacing;
        return emptyDocument({
          title: parts.title,
          content: {
            fftSize: parts.fftSize,
            subcarrierSpacingHz: parts.spacing,
            symbolCount: parts.symbolCount,
            prefixSamples,
            overlapSamples: Math.floor(overlapRatio * Math.min(...prefixSamples)),
            oversampling: parts.oversampling,
            frequencyOffsetHz:
              (0.999 * parts.offsetRatio * parts.fftSize * parts.oversampling * numerator) / denominator + 0,
            timing: parts.timing,
            tray: [bare, ...tray].map((ink, at) => ({ ...ink, inkId: `k${at}` })),
            grid,
            streams: parts.streams.map((stream, at) => ({ ...stream, streamId: `s${at}` })),
            level: { reference: 'samplePeak', headroomDb: parts.headroomDb },
            markers: [
              { name: 'Symbol', at: 'symbol', symbol: parts.symbolCount - 1, offsetSamples: 0, lengthSamples: 1 },
            ],
          },
        });
      }),
  );
