import { createHash } from 'node:crypto';
import { bitsPerCell, createCellValues, isMapKnown, pointsOf, type BitMap, type Constellation } from '@/lib/synth';
import { testCheck, testChecks } from '../../../../helpers/checks';
import { NULL_INK, dataInk, pnStream, smallContent } from '../../../../helpers/content';

const ALL: Constellation[] = ['bpsk', 'qpsk', '16qam', '64qam', '256qam', '1024qam', '4096qam'];

/** The constellation that a check's id ends with. */
const lastPart = (id: string): Constellation => id.slice(id.lastIndexOf('.') + 1) as Constellation;

function expectPoints(points: Float64Array, wanted: [number, number][], norm: number, tolerance: number): void {
  expect(points.length).toBe(2 * wanted.length);
  wanted.forEach(([re, im], word) => {
    expect(Math.abs(points[2 * word]! - re / Math.sqrt(norm))).toBeLessThanOrEqual(tolerance);
    expect(Math.abs(points[2 * word + 1]! - im / Math.sqrt(norm))).toBeLessThanOrEqual(tolerance);
  });
}

describe('IEEE 802.11 maps', () => {
  testCheck<Record<string, number>>('ieee80211.kmod', (kmod) => {
    for (const [name, factor] of Object.entries(kmod.expected)) {
      // the innermost point in the first quadrant is (1, 1)·K_MOD; BPSK's is (1, 0)
      const points = pointsOf(name as Constellation, 'ieee80211');
      const least = Math.min(...points.map(Math.abs).filter((part) => part > 0));
      expect(Math.abs(least - factor)).toBeLessThanOrEqual(1e-15);
    }
  });

  testChecks<{ points: [number, number][] }>(
    ['ieee80211.map.bpsk', 'ieee80211.map.qpsk', 'ieee80211.map.16qam', 'ieee80211.map.64qam'],
    ({ id, expected }) => expectPoints(pointsOf(lastPart(id), 'ieee80211'), expected.points, 1, 1e-12),
  );

  testCheck<{ data48: [number, number][] }, { interleaved_bits: string }>('ieee80211.example.freq', (check) => {
    const bits = check.input.interleaved_bits;
    const points = pointsOf('16qam', 'ieee80211');
    check.expected.data48.forEach(([re, im], i) => {
      const word = Number.parseInt(bits.slice(4 * i, 4 * i + 4), 2);
      expect(points[2 * word]).toBeCloseTo(re, 12);
      expect(points[2 * word + 1]).toBeCloseTo(im, 12);
    });
  });
});

describe('TS 38.211 maps', () => {
  interface MapCheck {
    integer_points?: [number, number][];
    integer_sha256_i16le: string;
    norm: number;
    first8: [number, number][];
  }
  const ids = [
    'ts38211.map.bpsk',
    'ts38211.map.qpsk',
    'ts38211.map.16qam',
    'ts38211.map.64qam',
    'ts38211.map.256qam',
    'ts38211.map.1024qam',
  ];
  testChecks<MapCheck>(ids, ({ id, expected }) => {
    const points = pointsOf(lastPart(id), 'ts38211');
    if (expected.integer_points) expectPoints(points, expected.integer_points, expected.norm, 1e-12);
    const integers = Int16Array.from(points, (part) => Math.round(part * Math.sqrt(expected.norm)));
    expect(createHash('sha256').update(new Uint8Array(integers.buffer)).digest('hex')).toBe(
      expected.integer_sha256_i16le,
    );
  });

  testCheck<{ points: [number, number][] }, { bits: string }>('ts38211.map.pi2-bpsk', (check) => {
    const content = smallContent({
      fftSize: 16,
      tray: [NULL_INK, dataInk(1, { constellation: 'pi2-bpsk', bitMap: 'ts38211', streamId: 's0' })],
      streams: [pnStream(0, { source: { kind: 'pattern', bits: check.input.bits } })],
      grid: { rows: [[3, 0, 5, 1, 8, 0]], rowOfSymbol: [0] },
    });
    const values = new Float64Array(32);
    createCellValues(content).write(0, 0, values);
    check.expected.points.forEach(([re, im], i) => {
      expect(values[2 * (3 + i)]).toBeCloseTo(re, 12);
      expect(values[2 * (3 + i) + 1]).toBeCloseTo(im, 12);
    });
  });
});

describe('EN 300 744 maps', () => {
  testChecks<{ integer_points: [number, number][] }, { norm: number }>(
    ['en300744.map.qpsk', 'en300744.map.16qam', 'en300744.map.64qam'],
    ({ id, expected, input }) =>
      expectPoints(pointsOf(lastPart(id), 'en300744'), expected.integer_points, input.norm, 1e-12),
  );
});

describe('every map', () => {
  const pairs = ALL.flatMap((name) =>
    (['ts38211', 'ieee80211', 'en300744'] as BitMap[]).map((map) => [name, map] as const),
  );
  it.each(pairs.filter(([name, map]) => isMapKnown(name, map)))(
    '%s by %s has unit mean power and Gray neighbours',
    (name, map) => {
      const points = pointsOf(name, map);
      const count = 1 << bitsPerCell(name);
      let power = 0;
      for (const part of points) power += part * part;
      expect(power / count).toBeCloseTo(1, 13);
      const norm = name === 'bpsk' ? 1 : Math.sqrt((2 * (count - 1)) / 3);
      if (name === 'bpsk') return;
      const byPlace = new Map<string, number>();
      for (let word = 0; word < count; word++) {
        byPlace.set(`${Math.round(points[2 * word]! * norm)},${Math.round(points[2 * word + 1]! * norm)}`, word);
      }
      expect(byPlace.size).toBe(count);
      for (const [place, word] of byPlace) {
        const [re, im] = place.split(',').map(Number) as [number, number];
        for (const neighbour of [byPlace.get(`${re + 2},${im}`), byPlace.get(`${re},${im + 2}`)]) {
          if (neighbour !== undefined) expect((word ^ neighbour).toString(2).replaceAll('0', '')).toBe('1');
        }
      }
    },
  );

  it('refuses the pairs that have no table', () => {
    expect(() => pointsOf('pi2-bpsk', 'ieee80211')).toThrow(expect.objectContaining({ code: 'bad_content' }));
    expect(() => pointsOf('256qam', 'en300744')).toThrow(expect.objectContaining({ code: 'bad_content' }));
  });
});
