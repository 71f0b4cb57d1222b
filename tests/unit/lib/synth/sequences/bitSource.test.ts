import { createHash } from 'node:crypto';
import { createBitSource, createSequence, sequenceValue, type BitSource, type PayloadSource } from '@/lib/synth';
import { testCheck, testChecks } from '../../../../helpers/checks';

/** The first `count` bits as text. */
function bitsOf(source: BitSource, count: number): string {
  const words = new Uint32Array(Math.ceil(count / 32));
  source.readWords(0, words.length, words, 0);
  return Array.from(words, (word) => word.toString(2).padStart(32, '0'))
    .join('')
    .slice(0, count);
}

function packedSha256(bits: string): string {
  const bytes = new Uint8Array(Math.ceil(bits.length / 8));
  for (let i = 0; i < bits.length; i++) if (bits[i] === '1') bytes[i >> 3]! |= 128 >> (i & 7);
  return createHash('sha256').update(bytes).digest('hex');
}

const ones = (bits: string): number => bits.replaceAll('0', '').length;

const O150: Record<string, PayloadSource & { kind: 'pn' }> = {
  pn9: { kind: 'pn', stages: 9, taps: [5, 9], seed: 511, inverted: false },
  pn11: { kind: 'pn', stages: 11, taps: [9, 11], seed: 2047, inverted: false },
  pn15: { kind: 'pn', stages: 15, taps: [14, 15], seed: 32767, inverted: true },
  pn20: { kind: 'pn', stages: 20, taps: [3, 20], seed: 1048575, inverted: false },
  pn23: { kind: 'pn', stages: 23, taps: [18, 23], seed: 8388607, inverted: true },
};

describe('registers of ITU-T O.150', () => {
  interface O150Check {
    period: number;
    ones_noninverted: number;
    ones_inverted: number;
    first64_noninverted: string;
    first64_inverted: string;
    standard_inverted: boolean;
    max_zero_run_standard: number;
    sha256_period_noninverted_packed_msb: string;
    sha256_period_inverted_packed_msb: string;
  }
  testChecks<O150Check>(['o150.pn9', 'o150.pn11', 'o150.pn15', 'o150.pn20', 'o150.pn23'], ({ id, expected }) => {
    const standard = O150[id.slice('o150.'.length)]!;
    expect(standard.inverted).toBe(expected.standard_inverted);
    const plain = bitsOf(createBitSource({ ...standard, inverted: false }), expected.period);
    const inverted = bitsOf(createBitSource({ ...standard, inverted: true }), expected.period);
    expect(plain.slice(0, 64)).toBe(expected.first64_noninverted);
    expect(inverted.slice(0, 64)).toBe(expected.first64_inverted);
    expect(ones(plain)).toBe(expected.ones_noninverted);
    expect(ones(inverted)).toBe(expected.ones_inverted);
    expect(packedSha256(plain)).toBe(expected.sha256_period_noninverted_packed_msb);
    expect(packedSha256(inverted)).toBe(expected.sha256_period_inverted_packed_msb);
    const chosen = standard.inverted ? inverted : plain;
    const longest = '0'.repeat(expected.max_zero_run_standard);
    expect(`${chosen}${chosen.slice(0, 64)}`.includes(longest)).toBe(true);
    expect(`${chosen}${chosen.slice(0, 64)}`.includes(`${longest}0`)).toBe(false);
  });

  // before zero suppression
  testCheck<{ first64: string; ones: number; forced_count: number }>('o150.qrss', ({ expected }) => {
    const bits = bitsOf(
      createBitSource({ kind: 'pn', stages: 20, taps: [17, 20], seed: 1048575, inverted: false }),
      1048575,
    );
    expect(bits.slice(0, 64)).toBe(expected.first64);
    expect(ones(bits)).toBe(expected.ones);
  });
});

describe('registers of other standards', () => {
  // x^7 + x^4 + 1
  testChecks<{ bits: string }>(['ieee80211.scrambler.ones', 'ieee80211.scrambler.annex'], ({ expected }) => {
    // the register's convention is by output bits: the first seven outputs are the seed, lowest bit first
    const seed = Number.parseInt([...expected.bits.slice(0, 7)].reverse().join(''), 2);
    const found = bitsOf(createBitSource({ kind: 'pn', stages: 7, taps: [4, 7], seed, inverted: false }), 127);
    expect(found).toBe(expected.bits);
  });

  interface PilotBits {
    first64: string;
    sum_1705: number;
    sum_6817: number;
    sha256_first1705_packed_msb: string;
  }
  testCheck<PilotBits>('en300744.prbs', (check) => {
    const bits = bitsOf(createBitSource({ kind: 'pn', stages: 11, taps: [9, 11], seed: 2047, inverted: false }), 6817);
    expect(bits.slice(0, 64)).toBe(check.expected.first64);
    expect(ones(bits.slice(0, 1705))).toBe(check.expected.sum_1705);
    expect(ones(bits)).toBe(check.expected.sum_6817);
    expect(packedSha256(bits.slice(0, 1705))).toBe(check.expected.sha256_first1705_packed_msb);
  });
});

describe('Gold sequences', () => {
  interface GoldCheck {
    first64: string;
    first1024_ones: number;
    first1024_sha256_packed_msb: string;
  }
  const ids = [
    'ts38211.gold.0',
    'ts38211.gold.1',
    'ts38211.gold.2',
    'ts38211.gold.12345',
    'ts38211.gold.51712',
    'ts38211.gold.74565',
    'ts38211.gold.2147483647',
  ];
  testChecks<GoldCheck, { c_init: number }>(ids, (check) => {
    const bits = bitsOf(createBitSource({ kind: 'gold', cInit: check.input.c_init }), 1024);
    expect(bits.slice(0, 64)).toBe(check.expected.first64);
    expect(ones(bits)).toBe(check.expected.first1024_ones);
    expect(packedSha256(bits)).toBe(check.expected.first1024_sha256_packed_msb);
  });

  interface ReferenceSignals {
    c_init: number;
    k: number[];
    a_times_sqrt2: [number, number][];
  }
  testChecks<ReferenceSignals>(
    ['ts36211.crs.150.0.0.0', 'ts36211.crs.150.0.4.0', 'ts36211.crs.150.1.0.1'],
    ({ expected }) => {
      const sequence = createSequence({ kind: 'gold', cInit: expected.c_init, points: 'qpsk' });
      // m′ = m + 110 − N_RB with N_RB = 6
      expected.a_times_sqrt2.forEach(([re, im], m) => {
        const value = sequenceValue(sequence, m + 104);
        expect(value[0] * Math.SQRT2).toBeCloseTo(re, 12);
        expect(value[1] * Math.SQRT2).toBeCloseTo(im, 12);
      });
    },
  );
});

describe('every source', () => {
  const sources: PayloadSource[] = [
    ...Object.values(O150),
    { kind: 'pn', stages: 2, taps: [1, 2], seed: 1, inverted: false },
    { kind: 'pn', stages: 31, taps: [1, 2, 3, 5, 8, 13, 21, 31], seed: 0x51234567, inverted: true },
    { kind: 'pn', stages: 4, taps: [4], seed: 5, inverted: false },
    { kind: 'gold', cInit: 4711 },
    { kind: 'zeros' },
    { kind: 'ones' },
    { kind: 'pattern', bits: '0' },
    { kind: 'pattern', bits: '1101001' },
    { kind: 'pattern', bits: '1'.repeat(63) + '0' },
    { kind: 'uploaded', name: 'a', bitCount: 3, base64: 'oA==' },
    { kind: 'uploaded', name: 'b', bitCount: 800, base64: Buffer.alloc(100, 0x9d).toString('base64') },
  ];
  it.each(sources)('reads the same bits from anywhere: $kind $bits $stages', (source) => {
    const straight = bitsOf(createBitSource(source), 6400);
    const other = createBitSource(source);
    const words = new Uint32Array(200);
    for (const [first, count] of [
      [150, 3],
      [20, 40],
      [60, 1],
      [61, 100],
      [0, 5],
      [199, 1],
    ] as const) {
      other.readWords(first, count, words, 2);
      for (let i = 0; i < count; i++) {
        const wanted = Number.parseInt(straight.slice(32 * (first + i), 32 * (first + i) + 32), 2);
        expect(words[2 + i]).toBe(wanted);
      }
    }
    for (const index of [0, 1, 31, 32, 4000, 2047, 6399]) expect(`${other.bit(index)}`).toBe(straight[index]);
  });

  it('obeys the register’s recurrence far out', () => {
    const far = createBitSource({ kind: 'pn', stages: 23, taps: [18, 23], seed: 99, inverted: false });
    const from = 2 ** 40;
    for (let t = from; t < from + 500; t += 7) expect(far.bit(t)).toBe(far.bit(t - 18) ^ far.bit(t - 23));
    // the period 2^23 − 1 comes round
    const whole = (2 ** 23 - 1) * 65536;
    for (const t of [0, 5, 22, 1000]) expect(far.bit(whole + t)).toBe(far.bit(t));
  });

  it('takes pattern and upload bit by bit, most significant first, and starts over', () => {
    const pattern = '110100111';
    const bits = bitsOf(createBitSource({ kind: 'pattern', bits: pattern }), 90);
    expect(bits).toBe(pattern.repeat(10));
    const uploaded = createBitSource({
      kind: 'uploaded',
      name: 'x',
      bitCount: 11,
      base64: Buffer.from([0xa5, 0xe0]).toString('base64'),
    });
    expect(bitsOf(uploaded, 22)).toBe('10100101111'.repeat(2));
  });

  it.each(['oA=', 'o*==', '', 'oA'])('refuses %p as an upload of 8 bits', (base64) => {
    const make = (): BitSource => createBitSource({ kind: 'uploaded', name: 'x', bitCount: 8, base64 });
    expect(make).toThrow(expect.objectContaining({ code: 'bad_content' }));
  });
});
