import { createCellValues, type Ink, type Sequence, type WaveformContent } from '@/lib/synth';
import { describeCheck, readCheck, testCheck } from '../../../helpers/checks';
import { NULL_INK, dataInk, factor, pilotInk, pnStream, rowOf, smallContent } from '../../../helpers/content';
import { renderSamples } from '../../../helpers/renderWords';

type Points = [number, number][];

const sts = readCheck<{ t16: Points }, { 'S_-26..26': Points }>('ieee80211.sts');
const lts = readCheck<{ t64: Points }, { 'L_-26..26': number[] }>('ieee80211.lts');
const bits = readCheck<{ signal_interleaved: string; data_interleaved: string[] }>('ieee80211.example.bits');
const pilots = readCheck<{ k: number[] }>('ieee80211.pilots');

/** Values for k = −32…31 from those for k = −26…26. */
function allSubcarriers(middle: Points): Points {
  const silence = (count: number): Points => Array.from({ length: count }, () => [0, 0]);
  return [...silence(6), ...middle, ...silence(5)];
}
const bySubcarrier = (points: Points): Ink['value'] => ({
  factors: [factor({ kind: 'listed', points: allSubcarriers(points) }, 'subcarrier')],
});

const isUsed = (k: number): boolean => k !== 0 && Math.abs(k) <= 26;
const isPilot = (k: number): boolean => pilots.expected.k.includes(k);
const short = sts.input['S_-26..26'];
const long: Points = lts.input['L_-26..26'].map((value) => [value, 0]);
const training = (k: number, points: Points): boolean => isUsed(k) && points[k + 26]!.some((part) => part !== 0);

/**
 * The whole packet as one document: every symbol 16 + 64 samples, ramps of one sample (weight ½), a burst.
 * The training parts have 160 samples each: two symbols whose content is periodic in 16, and two whose first is turned by
 * 48 samples, so that its prefix continues the long guard: times e^{j2πk·48/64} = (−j)^k.
 */
function packetContent(): WaveformContent {
  const polarity: Sequence = { kind: 'pn', stages: 7, taps: [4, 7], seed: 0b1110000, inverted: false };
  return smallContent({
    symbolCount: 11,
    prefixSamples: [16],
    overlapSamples: 1,
    subcarrierSpacingHz: [312500, 1],
    timing: { mode: 'burst', repeats: 1, gapSamples: 0, padSamples: 0 },
    tray: [
      NULL_INK,
      { ...pilotInk(1, []), value: bySubcarrier(short) } as Ink,
      { ...pilotInk(2, []), value: bySubcarrier(long) } as Ink,
      pilotInk(3, [
        factor({ kind: 'listed', points: allSubcarriers(long) }, 'subcarrier'),
        factor(
          {
            kind: 'listed',
            points: [
              [1, 0],
              [0, -1],
              [-1, 0],
              [0, 1],
            ],
          },
          'subcarrier',
        ),
      ]),
      dataInk(4, { constellation: 'bpsk', bitMap: 'ieee80211', streamId: 's0' }),
      dataInk(5, { constellation: '16qam', bitMap: 'ieee80211', streamId: 's1' }),
      // p_0 multiplies SIGNAL's pilots: symbol 4 here
      pilotInk(6, [
        factor({
          kind: 'listed',
          points: [
            [1, 0],
            [1, 0],
            [1, 0],
            [-1, 0],
          ],
        }),
        factor(polarity, 'symbol', -4),
      ]),
    ],
    streams: [
      pnStream(0, { source: { kind: 'pattern', bits: bits.expected.signal_interleaved } }),
      pnStream(1, { source: { kind: 'pattern', bits: bits.expected.data_interleaved.join('') } }),
    ],
    grid: {
      rows: [
        rowOf(64, (k) => (training(k, short) ? 1 : 0)),
        rowOf(64, (k) => (training(k, long) ? 3 : 0)),
        rowOf(64, (k) => (training(k, long) ? 2 : 0)),
        rowOf(64, (k) => (!isUsed(k) ? 0 : isPilot(k) ? 6 : 4)),
        rowOf(64, (k) => (!isUsed(k) ? 0 : isPilot(k) ? 6 : 5)),
      ],
      rowOfSymbol: [0, 0, 1, 2, 3, 4, 4, 4, 4, 4, 4],
    },
  });
}

describeCheck<{ n: number; samples: Points }>('ieee80211.example.time', (packet) => {
  // the standard scales by 1/64, the product by 1/√64
  const samples = renderSamples(packetContent()).map((part) => part / 8);

  it('has all 881 samples', () => {
    expect(samples.length / 2).toBe(packet.expected.n);
    packet.expected.samples.forEach(([re, im], i) => {
      expect(Math.abs(samples[2 * i]! - re)).toBeLessThan(1e-12);
      expect(Math.abs(samples[2 * i + 1]! - im)).toBeLessThan(1e-12);
    });
  });

  testCheck('ieee80211.example.bits', () => {
    // first bit most significant; the first half of a word is I (17.3.5.8)
    const levels: Record<string, number> = { '00': -3, '01': -1, '11': 1, '10': 3 };
    const cells = createCellValues(packetContent());
    const values = new Float64Array(128);
    const symbols = [bits.expected.signal_interleaved, ...bits.expected.data_interleaved];
    expect(symbols).toHaveLength(7);
    symbols.forEach((text, i) => {
      cells.write(0, 4 + i, values);
      const width = i === 0 ? 1 : 4;
      expect(text).toHaveLength(48 * width);
      let at = 0;
      for (let k = -26; k <= 26; k++) {
        if (!isUsed(k) || isPilot(k)) continue;
        const word = text.slice(at, at + width);
        const wanted =
          width === 1
            ? [Number(word) * 2 - 1, 0]
            : [word.slice(0, 2), word.slice(2)].map((half) => levels[half]! / Math.sqrt(10));
        expect(Math.abs(values[2 * (k + 32)]! - wanted[0]!)).toBeLessThan(1e-12);
        expect(Math.abs(values[2 * (k + 32) + 1]! - wanted[1]!)).toBeLessThan(1e-12);
        at += width;
      }
    });
  });

  testCheck('ieee80211.sts', () => {
    sts.expected.t16.forEach(([re, im], i) => {
      expect(Math.abs(samples[2 * (16 + i)]! - re)).toBeLessThan(1e-12);
      expect(Math.abs(samples[2 * (16 + i) + 1]! - im)).toBeLessThan(1e-12);
    });
  });

  testCheck('ieee80211.lts', () => {
    lts.expected.t64.forEach(([re, im], i) => {
      // the very first and last samples of a segment are ramped
      for (const start of i === 0 ? [256] : [192, 256]) {
        expect(Math.abs(samples[2 * (start + i)]! - re)).toBeLessThan(1e-12);
        expect(Math.abs(samples[2 * (start + i) + 1]! - im)).toBeLessThan(1e-12);
      }
    });
  });
});
