import { readFileSync } from 'node:fs';
import { parseWaveformDocument } from '@/lib/document/parse';
import { presets } from '@/lib/document/presets/presets';
import { referenceSignalInit, referenceSignalShift, referenceSignalStart } from '@/lib/document/presets/ts36211';
import { createSequence, expandGrid, sequenceValue, type Factor, type WaveformContent } from '@/lib/synth/index';

interface Check {
  id: string;
  source: string;
  expected: never;
}
const { checks } = JSON.parse(readFileSync('tests/fixtures/checks/presets.json', 'utf8')) as { checks: Check[] };
const expected = <T>(id: string): T => checks.find((check) => check.id === id)!.expected;
const contentOf = (presetId: string): WaveformContent =>
  presets.find((preset) => preset.presetId === presetId)!.build().content;

/** The signed subcarriers of an ink in one symbol. */
function subcarriersOf(content: WaveformContent, ink: number | ((ink: number) => boolean), symbol: number): number[] {
  const isWanted = typeof ink === 'number' ? (one: number) => one === ink : ink;
  const cells = expandGrid(content.grid, content.fftSize).subarray(
    symbol * content.fftSize,
    (symbol + 1) * content.fftSize,
  );
  return Array.from(cells.keys())
    .filter((position) => isWanted(cells[position]!))
    .map((position) => position - Math.floor(content.fftSize / 2));
}

const valueAt = (factor: Factor, index: number): [number, number] =>
  sequenceValue(createSequence(factor.sequence), index + factor.start);

test.each(presets.map((preset) => [preset.presetId, preset] as const))(
  '%s is a right document that cites its source',
  (_id, preset) => {
    const document = preset.build();
    expect(parseWaveformDocument(JSON.stringify(document))).toEqual({ ok: true, value: document });
    expect(document.about.basedOn).toBe(preset.basedOn);
    expect(document.about.title).toBe(preset.title);
    expect(preset.leftOut.length).toBeGreaterThan(0);
    for (const left of preset.leftOut) expect(document.about.notes).toContain(left);
    expect(document.content.streams.every(({ fill }) => fill === 'running')).toBe(true);
    expect(document.content.level).toEqual({ reference: 'interpolatedPeak', headroomDb: 1 });
  },
);

describe('IEEE 802.11 clause 17 at 20 MHz', () => {
  const content = contentOf('ieee80211-20mhz');

  test('ieee80211.timing: Table 17-5', () => {
    const timing = expected<Record<string, number>>('ieee80211.timing');
    expect(content.fftSize).toBe(timing.fft);
    expect(content.prefixSamples).toEqual([timing.cp]);
    expect(content.subcarrierSpacingHz).toEqual([timing.scs_hz, 1]);
    for (let symbol = 0; symbol < content.symbolCount; symbol += 1) {
      expect(subcarriersOf(content, 1, symbol)).toHaveLength(timing.n_sd!);
      expect(subcarriersOf(content, 2, symbol)).toHaveLength(timing.n_sp!);
      const used = subcarriersOf(content, (ink) => ink !== 0, symbol);
      expect([used.length, used[0], used.at(-1), used.includes(0)]).toEqual([timing.n_st, -26, 26, false]);
    }
  });

  test('ieee80211.pilots: 17.3.5.9, 17.3.5.10, places, base values and polarity', () => {
    const pilots = expected<{ k: number[]; base: number[]; polarity: number[] }>('ieee80211.pilots');
    const ink = content.tray[2]!;
    if (ink.role !== 'pilot') throw new Error('no pilot ink');
    const [base, polarity] = ink.value.factors as [Factor, Factor];
    expect(subcarriersOf(content, 2, 5)).toEqual(pilots.k);
    expect([base.counter, polarity.counter]).toEqual(['symbolCell', 'symbol']);
    expect(pilots.k.map((_k, cell) => valueAt(base, cell))).toEqual(pilots.base.map((value) => [value, 0]));
    // p_0 belongs to the SIGNAL symbol; the first data symbol has p_1
    for (let symbol = 0; symbol < 300; symbol += 1) {
      expect(valueAt(polarity, symbol)[0]).toBe(pilots.polarity[(symbol + 1) % 127]);
    }
  });
});

describe('TS 36.211, normal prefix, 5 MHz', () => {
  const content = contentOf('ts36211-5mhz');

  test('ts36211.cp: Table 6.12-1 at N = 512', () => {
    const { normal, slot_samples: slotSamples } = expected<{ normal: number[]; slot_samples: number }>('ts36211.cp');
    expect(content.prefixSamples).toEqual(normal.map((samples) => samples / 4));
    const frame = content.prefixSamples.reduce((sum, prefix) => sum + prefix, 7 * content.fftSize);
    expect(frame).toBe(slotSamples / 4);
    expect(content.fftSize * 15000).toBe(7.68e6);
    const used = subcarriersOf(content, (ink) => ink !== 0, 3);
    expect([used.length, used[0], used.at(-1), used.includes(0)]).toEqual([300, -150, 150, false]);
  });

  test.each([
    ['ts36211.crs.150.0.0.0', 0, 0],
    ['ts36211.crs.150.0.4.0', 0, 4],
  ])('%s: reference signals of port 0', (id, slot, symbol) => {
    const check = expected<{ c_init: number; k: number[]; a_times_sqrt2: [number, number][] }>(id);
    const cInit = referenceSignalInit(150, slot, symbol);
    expect(cInit).toBe(check.c_init);
    const factor: Factor = {
      sequence: { kind: 'gold', cInit, points: 'qpsk' },
      counter: 'symbolCell',
      start: referenceSignalStart(6),
    };
    check.a_times_sqrt2.forEach((point, cell) => {
      const [re, im] = valueAt(factor, cell);
      expect([re * Math.SQRT2, im * Math.SQRT2].map((part) => Math.round(part * 1e12) / 1e12)).toEqual(point);
    });
    expect(check.k.map((k) => k % 6)).toEqual(new Array(12).fill(referenceSignalShift(150, symbol)));
    // and the same init and raster stand in the layout
    const at = content.tray.findIndex(
      (ink) => ink.role === 'pilot' && JSON.stringify(ink).includes(`"cInit":${cInit},`),
    );
    expect(content.tray[at]).toMatchObject({ value: { factors: [{ counter: 'symbolCell', start: 110 - 25 }] } });
    const fromLowest = subcarriersOf(content, at, symbol).map((k) => (k < 0 ? k + 150 : k + 149));
    expect(fromLowest).toEqual(Array.from({ length: 50 }, (_, m) => 6 * m + check.k[0]!));
  });

  test('the second slot has its own init (equal to port 1’s check: the port does not enter it)', () => {
    expect(referenceSignalInit(150, 1, 0)).toBe(expected<{ c_init: number }>('ts36211.crs.150.1.0.1').c_init);
    expect(subcarriersOf(content, 4, 7)).toHaveLength(50);
    expect(subcarriersOf(content, 5, 11)).toHaveLength(50);
    expect(subcarriersOf(content, (ink) => ink > 1, 1)).toEqual([]);
  });
});
