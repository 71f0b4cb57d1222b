import { createCellValues, deriveFigures, frameLayout, type Sequence, type WaveformContent } from '@/lib/synth';
import { readCheck, testCheck } from '../../../helpers/checks';
import { NULL_INK, dataInk, factor, pilotInk, pnStream, rowOf, smallContent } from '../../../helpers/content';

const qpsk = dataInk(1, { constellation: 'qpsk', bitMap: 'ts38211', streamId: 's0' });

function loaded(changes: Partial<WaveformContent>, inkOf: (k: number) => number): WaveformContent {
  const content = smallContent({
    tray: [NULL_INK, qpsk, pilotInk(2, [factor({ kind: 'constant' })])],
    streams: [pnStream(0)],
    ...changes,
  });
  return {
    ...content,
    grid: { rows: [rowOf(content.fftSize, inkOf)], rowOfSymbol: new Array<number>(content.symbolCount).fill(0) },
  };
}

describe('timings of standards', () => {
  testCheck<Record<string, number>>('ieee80211.timing', ({ expected }) => {
    const isPilot = (k: number): boolean => [7, 21].includes(Math.abs(k));
    const content = loaded({ prefixSamples: [16], subcarrierSpacingHz: [312500, 1] }, (k) =>
      k === 0 || Math.abs(k) > 26 ? 0 : isPilot(k) ? 2 : 1,
    );
    const figures = deriveFigures(content);
    expect(content.fftSize).toBe(expected.fft);
    expect(content.prefixSamples[0]).toBe(expected.cp);
    expect(figures.sampleClockHz).toBe(20e6);
    expect(figures.usefulTimeSec * 1e6).toBeCloseTo(expected.t_fft_us!, 12);
    expect(figures.symbolTimeSec * 1e6).toBeCloseTo(expected.t_sym_us!, 12);
    expect((frameLayout(content).prefixes[0]! / 20e6) * 1e6).toBeCloseTo(expected.t_gi_us!, 12);
    expect([figures.dataCells, figures.pilotCells, figures.usedCells]).toEqual([
      expected.n_sd,
      expected.n_sp,
      expected.n_st,
    ]);
  });

  const nr = readCheck<Record<string, Record<string, number>>>('ts38211.cp');
  testCheck('ts38211.cp', () => {
    for (const [name, wanted] of Object.entries(nr.expected)) {
      if (name.endsWith('.extended')) continue; // one prefix for all symbols: 512 of 2048, as the entry below
      const fftSize = Number(/N(\d+)/.exec(name)![1]);
      const perHalf = wanted.symbols_per_subframe! / 2;
      const content = smallContent({
        fftSize,
        symbolCount: wanted.symbols_per_subframe!,
        prefixSamples: [wanted.cp_first!, ...new Array<number>(perHalf - 1).fill(wanted.cp_normal!)],
        subcarrierSpacingHz: [wanted.scs_khz! * 1000, 1],
      });
      const layout = frameLayout(content);
      expect(layout.samples).toBe(wanted.samples_per_subframe);
      const long = [...layout.prefixes.keys()].filter((symbol) => layout.prefixes[symbol] === wanted.cp_first);
      expect(long).toEqual(wanted.long_cp_symbols_in_subframe);
      expect(deriveFigures(content).sampleClockHz).toBe(wanted.fs_mhz! * 1e6);
      expect(deriveFigures(content).frameTimeSec).toBeCloseTo(1e-3, 15);
    }
  });

  testCheck<{ normal: number[]; extended: number[]; slot_samples: number }>('ts36211.cp', (lte) => {
    expect(lte.expected.extended[0]).toBe(nr.expected['N2048.mu2.extended']!.cp);
    for (const prefixSamples of [lte.expected.normal, lte.expected.extended]) {
      const content = smallContent({ fftSize: 2048, symbolCount: prefixSamples.length, prefixSamples });
      expect(frameLayout(content).samples).toBe(lte.expected.slot_samples);
    }
  });

  interface DvbMode {
    K: number;
    fft: number;
    Tu_us: number;
    scs_hz: number;
    cp: Record<string, number>;
    bw_mhz: number;
  }
  testCheck<{ '2K': DvbMode; '8K': DvbMode; fs_mhz: number }>('en300744.params', (dvb) => {
    for (const [name, spacing] of [
      ['2K', 31250],
      ['8K', 31250 / 4],
    ] as const) {
      const mode = dvb.expected[name];
      const half = (mode.K - 1) / 2;
      for (const prefix of Object.values(mode.cp)) {
        // 1/T_U exactly: 31250/7 Hz, and a quarter of it as [15625, 14]
        const content = loaded(
          {
            fftSize: mode.fft,
            prefixSamples: [prefix],
            subcarrierSpacingHz: Number.isInteger(spacing) ? [31250, 7] : [15625, 14],
          },
          (k) => (Math.abs(k) <= half ? 1 : 0),
        );
        const figures = deriveFigures(content);
        expect(figures.subcarrierSpacingHz).toBeCloseTo(mode.scs_hz, 9);
        expect(figures.usefulTimeSec * 1e6).toBeCloseTo(mode.Tu_us, 9);
        expect(figures.sampleClockHz / 1e6).toBeCloseTo(dvb.expected.fs_mhz, 9);
        expect(figures.sampleClock).toEqual({ numerator: 64000000n, denominator: 7n });
        expect(figures.usedSubcarriers).toBe(mode.K);
        // the standard gives (K − 1) spacings; the painted span counts K of them
        expect((figures.paintedSpanHz - figures.subcarrierSpacingHz) / 1e6).toBeCloseTo(mode.bw_mhz, 9);
      }
    }
  });

  testCheck<Record<string, number>>('en300401.modeI', ({ expected }) => {
    // the null symbol stands as the gap of the repeat
    const content = loaded(
      {
        fftSize: expected.fft!,
        symbolCount: expected.symbols_per_frame!,
        prefixSamples: [expected.guard_samples!],
        subcarrierSpacingHz: [expected.scs_hz!, 1],
        timing: { mode: 'loop', repeats: 1, gapSamples: expected.null_samples!, padSamples: 0 },
      },
      (k) => (k !== 0 && Math.abs(k) <= 768 ? 1 : 0),
    );
    const figures = deriveFigures(content);
    expect(figures.usedSubcarriers).toBe(expected.carriers);
    expect(figures.sampleClockHz).toBe(expected.fs_mhz! * 1e6);
    expect(frameLayout(content).repeatSamples).toBe(expected.frame_samples);
    expect(frameLayout(content).symbolStarts[1]).toBe(expected.symbol_samples);
  });
});

describe('pilots of EN 300 744', () => {
  interface PilotCheck {
    continual: number[];
    tps: number[];
    'scattered_count_l0..3': number[];
    'pilots_union_count_l0..3': number[];
    'data_count_l0..3': number[];
    boosted_amplitude: number;
    boost_power: number;
  }
  const prbs = readCheck<{ first64: string }>('en300744.prbs');
  testCheck<PilotCheck>('en300744.pilots2k', ({ expected }) => {
    const low = -852;
    const isScattered = (carrier: number, symbol: number): boolean =>
      carrier >= 3 * (symbol % 4) && (carrier - 3 * (symbol % 4)) % 12 === 0;
    const inkOf = (k: number, symbol: number): number => {
      const carrier = k - low;
      if (carrier < 0 || carrier > 1704) return 0;
      if (expected.continual.includes(carrier) || isScattered(carrier, symbol)) return 2;
      return expected.tps.includes(carrier) ? 3 : 1;
    };
    // boosted pilots: 4/3 · 2(½ − w_k), the register restarting at the lowest carrier of every symbol
    const register: Sequence = { kind: 'pn', stages: 11, taps: [9, 11], seed: 2047, inverted: false };
    const boosted = pilotInk(2, [
      factor(register, 'subcarrier', -(1024 + low)),
      factor({ kind: 'listed', points: [[4 / 3, 0]] }, 'symbol'),
    ]);
    const content = smallContent({
      fftSize: 2048,
      symbolCount: 4,
      prefixSamples: [64],
      tray: [
        NULL_INK,
        dataInk(1, { constellation: '64qam', bitMap: 'en300744', streamId: 's0' }),
        boosted,
        pilotInk(3, [factor(register, 'subcarrier', -(1024 + low))]),
      ],
      streams: [pnStream(0)],
      grid: { rows: [0, 1, 2, 3].map((symbol) => rowOf(2048, (k) => inkOf(k, symbol))), rowOfSymbol: [0, 1, 2, 3] },
    });
    const values = createCellValues(content);
    const written = new Float64Array(4096);
    for (let symbol = 0; symbol < 4; symbol++) {
      const inks = [...values.cells.subarray(2048 * symbol, 2048 * (symbol + 1))];
      expect(inks.filter((ink) => ink === 2).length).toBe(expected['pilots_union_count_l0..3'][symbol]);
      expect(inks.filter((ink) => ink === 1).length).toBe(expected['data_count_l0..3'][symbol]);
      expect(Array.from({ length: 1705 }, (_, carrier) => carrier).filter((c) => isScattered(c, symbol)).length).toBe(
        expected['scattered_count_l0..3'][symbol],
      );
      values.write(0, symbol, written);
      for (let carrier = 0; carrier < 64; carrier++) {
        const p = 1024 + low + carrier;
        if (inks[p] !== 2) continue;
        const sign = prbs.expected.first64[carrier] === '1' ? -1 : 1;
        expect(written[2 * p]).toBeCloseTo(sign * expected.boosted_amplitude, 12);
        expect(written[2 * p]! ** 2).toBeCloseTo(expected.boost_power, 12);
        expect(written[2 * p + 1]).toBe(0);
      }
    }
  });
});
