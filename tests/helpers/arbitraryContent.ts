import fc from 'fast-check';
import {
  compressGrid,
  isMapKnown,
  type BitMap,
  type Constellation,
  type Factor,
  type Ink,
  type Marker,
  type PayloadSource,
  type Sequence,
  type Stream,
  type WaveformContent,
} from '@/lib/synth';

/** How large random contents may grow; small by default, so that properties stay quick. */
export interface ArbitraryLimits {
  /** Most N·L. */
  cellsMost: number;
  /** Most samples of the file, rendered at M. */
  samplesMost: number;
}

const SMALL: ArbitraryLimits = { cellsMost: 2048, samplesMost: 65536 };

/** 5-smooth sizes 16…4096. */
const SIZES = Array.from({ length: 4081 }, (_, i) => i + 16).filter((size) => {
  let rest = size;
  for (const prime of [2, 3, 5]) while (rest % prime === 0) rest /= prime;
  return rest === 1;
});

function gcd(a: number, b: number): number {
  return b === 0 ? a : gcd(b, a % b);
}

const register = fc.integer({ min: 2, max: 31 }).chain((stages) =>
  fc.record({
    kind: fc.constant('pn' as const),
    stages: fc.constant(stages),
    taps: fc
      .uniqueArray(fc.integer({ min: 1, max: stages - 1 }), { maxLength: 7 })
      .map((taps) => [...taps.sort((a, b) => a - b), stages]),
    seed: fc.integer({ min: 1, max: 2 ** stages - 1 }),
    inverted: fc.boolean(),
  }),
);

const cInit = fc.integer({ min: 0, max: 2147483647 });

const part = fc.integer({ min: -200, max: 200 }).map((value) => value / 64 + 0);

const sequence: fc.Arbitrary<Sequence> = fc.oneof(
  fc.constant<Sequence>({ kind: 'constant' }),
  fc.constant<Sequence>({ kind: 'alternating' }),
  register,
  fc.record({ kind: fc.constant('gold' as const), cInit, points: fc.constantFrom('bpsk' as const, 'qpsk' as const) }),
  fc.tuple(fc.integer({ min: 2, max: 1000 }), fc.nat(), fc.nat()).map(([length, root, shift]): Sequence => {
    let coprime = 1 + (root % (length - 1));
    while (gcd(coprime, length) !== 1) coprime++;
    return { kind: 'zadoffChu', length, root: coprime, shift: shift % length };
  }),
  fc.record({
    kind: fc.constantFrom('newman' as const, 'schroeder' as const),
    count: fc.integer({ min: 1, max: 2000 }),
  }),
  fc.record({
    kind: fc.constant('listed' as const),
    points: fc.array(fc.tuple(part, part), { minLength: 1, maxLength: 5 }),
  }),
);

function factor(counters: Factor['counter'][]): fc.Arbitrary<Factor> {
  return fc.record({ sequence, counter: fc.constantFrom(...counters), start: fc.nat({ max: 5000 }) });
}

const source: fc.Arbitrary<PayloadSource> = fc.oneof(
  register,
  fc.record({ kind: fc.constant('gold' as const), cInit }),
  fc.constant<PayloadSource>({ kind: 'zeros' }),
  fc.constant<PayloadSource>({ kind: 'ones' }),
  fc
    .array(fc.constantFrom('0', '1'), { minLength: 1, maxLength: 100 })
    .map((bits): PayloadSource => ({ kind: 'pattern', bits: bits.join('') })),
  fc.uint8Array({ minLength: 1, maxLength: 40 }).chain((bytes) =>
    fc.integer({ min: 8 * bytes.length - 7, max: 8 * bytes.length }).map((bitCount): PayloadSource => {
      const kept = Uint8Array.from(bytes);
      kept[kept.length - 1]! &= 0xff << (8 * kept.length - bitCount); // unused bits are 0
      return { kind: 'uploaded', name: 'upload', bitCount, base64: Buffer.from(kept).toString('base64') };
    }),
  ),
);

const CONSTELLATIONS: Constellation[] = ['bpsk', 'pi2-bpsk', 'qpsk', '16qam', '64qam', '256qam', '1024qam', '4096qam'];
const PAIRS = CONSTELLATIONS.flatMap((constellation) =>
  (['ts38211', 'ieee80211', 'en300744'] as BitMap[])
    .filter((bitMap) => isMapKnown(constellation, bitMap))
    .map((bitMap) => ({ constellation, bitMap })),
);

const powerDb = fc.constantFrom(0, 0, 0, 2.5, -3, 3, -20.25);

function ink(place: number, streamCount: number): fc.Arbitrary<Ink> {
  const common = { inkId: fc.constant(`k${place}`), name: fc.constant(`ink ${place}`), powerDb };
  const pilots = fc.array(factor(['cell', 'symbolCell', 'subcarrier', 'symbol']), { minLength: 1, maxLength: 3 });
  const tones = fc.array(factor(['symbolCell', 'subcarrier']), { maxLength: 3 });
  const phaseDeg = fc.constantFrom(0, 90, -45, 12.5, 359.9);
  const kinds: fc.Arbitrary<Ink>[] = [
    fc.record({ ...common, role: fc.constant('pilot' as const), value: fc.record({ factors: pilots }) }),
    fc.record({
      ...common,
      role: fc.constant('tone' as const),
      value: fc.record({ factors: tones, phaseDeg, continuous: fc.boolean() }),
    }),
    fc.record({ ...common, role: fc.constant('reserved' as const), value: fc.constant(null) }),
  ];
  if (streamCount > 0) {
    const value = fc
      .tuple(fc.constantFrom(...PAIRS), fc.integer({ min: 0, max: streamCount - 1 }))
      .map(([pair, stream]) => ({ ...pair, streamId: `s${stream}` }));
    const data = fc.record({ ...common, role: fc.constant('data' as const), value });
    kinds.push(data, data, data);
  }
  return fc.oneof(...kinds);
}

function stream(place: number): fc.Arbitrary<Stream> {
  return fc.record({
    streamId: fc.constant(`s${place}`),
    name: fc.constant(`stream ${place}`),
    source,
    fill: fc.constantFrom('running' as const, 'anchored' as const),
    acrossRepeats: fc.constantFrom('restart' as const, 'continue' as const),
  });
}

/** Cells painted in a few rectangles over null, so that runs and rows look like a person's. */
function cells(fftSize: number, symbolCount: number, inks: number): fc.Arbitrary<Uint8Array> {
  const rectangle = fc.tuple(
    fc.integer({ min: 0, max: fftSize - 1 }),
    fc.integer({ min: 1, max: fftSize }),
    fc.integer({ min: 0, max: symbolCount - 1 }),
    fc.integer({ min: 1, max: symbolCount }),
    fc.integer({ min: 1, max: 4 }),
    fc.integer({ min: 0, max: inks - 1 }),
  );
  return fc.array(rectangle, { minLength: 1, maxLength: 6 }).map((rectangles) => {
    const painted = new Uint8Array(fftSize * symbolCount);
    for (const [left, width, top, height, step, number] of rectangles) {
      for (let l = top; l < Math.min(symbolCount, top + height); l++) {
        for (let p = left; p < Math.min(fftSize, left + width); p += step) painted[l * fftSize + p] = number;
      }
    }
    return painted;
  });
}

function markers(symbolCount: number): fc.Arbitrary<Marker[]> {
  const offsets = {
    offsetSamples: fc.integer({ min: -300, max: 300 }),
    lengthSamples: fc.integer({ min: 1, max: 300 }),
  };
  const whole = fc.record({
    name: fc.constant('marker'),
    at: fc.constantFrom('file' as const, 'repeat' as const),
    symbol: fc.constant(null),
    ...offsets,
  });
  const inSymbol = fc.record({
    name: fc.constant('symbol marker'),
    at: fc.constant('symbol' as const),
    symbol: fc.option(fc.integer({ min: 0, max: symbolCount - 1 })),
    ...offsets,
  });
  return fc.array(fc.oneof(whole, inSymbol), { maxLength: 4 });
}

/**
 * Valid contents over the whole of the document: any size with its prefixes, every ink, sequence, source, both fills,
 * both modes, gaps, pads, overlaps, offsets. Peak reduction is none; markers stand in loops only (a burst refuses what
 * leaves it).
 */
export function arbitraryContent(limits: Partial<ArbitraryLimits> = {}): fc.Arbitrary<WaveformContent> {
  const { cellsMost, samplesMost } = { ...SMALL, ...limits };
  const sizes = SIZES.filter((size) => size <= cellsMost && size <= samplesMost / 4);
  return fc
    .record({
      fftSize: fc.constantFrom(...sizes),
      oversampling: fc.constantFrom(1, 1, 1, 2, 3, 4, 5),
      streams: fc.nat({ max: 3 }),
    })
    .chain((sizesOf) =>
      fc.record({
        fftSize: fc.constant(sizesOf.fftSize),
        oversampling: fc.constant(sizesOf.oversampling),
        streams: fc.constant(sizesOf.streams),
        symbolCount: fc.integer({ min: 1, max: Math.max(1, Math.min(40, Math.floor(cellsMost / sizesOf.fftSize))) }),
        inks: fc.integer({ min: 1, max: 6 }),
      }),
    )
    .chain(({ fftSize, oversampling, streams: streamCount, symbolCount, inks }) => {
      const prefix = fc.oneof(fc.integer({ min: 0, max: fftSize }), fc.integer({ min: 0, max: fftSize >> 2 }));
      return fc
        .record({
          spacing: fc.constantFrom<[number, number]>([15000, 1], [312500, 1], [31250, 7], [1000, 3], [1, 1]),
          prefixSamples: fc.array(prefix, { minLength: 1, maxLength: symbolCount }),
          overlap: fc.nat(),
          offsetShare: fc.constantFrom(0, 0, 0.25, -0.125, 0.1234567, -0.5),
          mode: fc.constantFrom('loop' as const, 'burst' as const),
          repeats: fc.integer({ min: 1, max: 4 }),
          gapSamples: fc.oneof(fc.constant(0), fc.nat({ max: 50 })),
          padSamples: fc.oneof(fc.constant(0), fc.nat({ max: 100 })),
          tray: fc.tuple(...Array.from({ length: inks }, (_, i) => ink(i + 1, streamCount))),
          cells: cells(fftSize, symbolCount, inks + 1),
          streams: fc.tuple(...Array.from({ length: streamCount }, (_, i) => stream(i))),
          markers: markers(symbolCount),
          reference: fc.constantFrom(
            'interpolatedPeak' as const,
            'samplePeak' as const,
            'componentPeak' as const,
            'rms' as const,
          ),
          headroomDb: fc.constantFrom(0, 1, 3.5, 12),
        })
        .map((made): WaveformContent => {
          const shortest = Math.min(...made.prefixSamples);
          const clockHz = (fftSize * oversampling * made.spacing[0]) / made.spacing[1];
          return {
            fftSize,
            subcarrierSpacingHz: made.spacing,
            symbolCount,
            prefixSamples: made.prefixSamples,
            overlapSamples: made.overlap % (shortest + 1),
            oversampling,
            frequencyOffsetHz: made.offsetShare === 0 ? 0 : Math.trunc(made.offsetShare * clockHz) + 0,
            timing: {
              mode: made.mode,
              repeats: made.repeats,
              gapSamples: made.gapSamples,
              padSamples: made.padSamples,
            },
            tray: [{ inkId: 'k0', name: 'null', role: 'null', powerDb: 0, value: null }, ...made.tray],
            grid: compressGrid(made.cells, fftSize, symbolCount),
            streams: [...made.streams],
            peakReduction: { kind: 'none' },
            level: { reference: made.reference, headroomDb: made.headroomDb },
            markers: made.mode === 'loop' ? made.markers : [],
          };
        });
    })
    .filter((content) => {
      const prefixes = content.prefixSamples;
      let frame = content.symbolCount * content.fftSize + content.timing.gapSamples;
      for (let l = 0; l < content.symbolCount; l++) frame += prefixes[l % prefixes.length]!;
      return frame * content.timing.repeats * content.oversampling + content.timing.padSamples <= samplesMost;
    });
}
