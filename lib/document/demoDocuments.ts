import type { Ink, RunGrid, WaveformDocument } from '@/lib/synth/index';
import { emptyDocument, newIntent } from './newDocument';
import { canonicalGrid } from './runs';

// Waveforms of the demo team. Invented: they stand for no product, standard or measurement.

type Fill = [from: number, to: number, ink: number];

/** Rows painted over bare paper: later fills cover earlier ones; `comb` lists single subcarriers. */
function row(
  fftSize: number,
  fills: readonly Fill[],
  comb: { ink: number; at: readonly number[]; spares?: number } | null = null,
): number[] {
  const low = -Math.floor(fftSize / 2);
  const cells = new Uint8Array(fftSize);
  for (const [from, to, ink] of fills) cells.fill(ink, from - low, to - low + 1);
  for (const k of comb?.at ?? [])
    if (cells[k - low] !== 0 && cells[k - low] !== comb!.spares) cells[k - low] = comb!.ink;
  return Array.from(cells).flatMap((ink) => [1, ink]);
}

function grid(symbolCount: number, rowOf: (symbol: number) => number[]): RunGrid {
  const rows = Array.from({ length: symbolCount }, (_, symbol) => rowOf(symbol));
  return canonicalGrid({ rows, rowOfSymbol: rows.map((_, symbol) => symbol) });
}

const steps = (from: number, to: number, by: number) =>
  Array.from({ length: Math.floor((to - from) / by) + 1 }, (_, i) => from + i * by);

const bare: Ink = { inkId: 'k0', name: 'Null', role: 'null', powerDb: 0, value: null };
const data = (
  place: number,
  name: string,
  constellation: 'qpsk' | '16qam' | '64qam' | '256qam' | '1024qam' | '4096qam',
  powerDb = 0,
): Ink => ({
  inkId: `k${place}`,
  name,
  role: 'data',
  powerDb,
  value: { constellation, bitMap: 'ts38211', streamId: 's0' },
});
const goldPilot = (place: number, cInit: number): Ink => ({
  inkId: `k${place}`,
  name: 'Pilot',
  role: 'pilot',
  powerDb: 0,
  value: { factors: [{ sequence: { kind: 'gold', cInit, points: 'qpsk' }, counter: 'subcarrier', start: 0 }] },
});
const tone = (place: number, powerDb: number, phaseDeg = 0): Ink => ({
  inkId: `k${place}`,
  name: 'Tone',
  role: 'tone',
  powerDb,
  value: { factors: [], phaseDeg, continuous: true },
});

/** A power amplifier's ladder: six constellations side by side, a notch, a strong tone, free cells at both edges. */
export function paLadder(): WaveformDocument {
  const symbolCount = 14;
  const pilotSymbols = [2, 5, 8, 11];
  const blocks = (swapped: boolean): Fill[] => [
    [-588, -421, 2],
    [-360, -121, swapped ? 4 : 3],
    [-120, 120, swapped ? 3 : 4],
    [121, 300, 5],
    [372, 480, 6],
    [481, 588, 7],
  ];
  const opening: Fill[] = [
    [-588, -421, 1],
    [-360, 300, 1],
    [372, 588, 1],
  ];
  const edges: Fill[] = [
    [-600, -589, 10],
    [589, 600, 10],
    [-390, -390, 9],
  ];
  const document = emptyDocument({
    title: 'PA ladder 20 MHz, notch at +5 MHz',
    notes: 'Invented for the demo. Notch for a noise power ratio, a tone 3.9 MHz below the notch of the front end.',
  });
  document.content = {
    ...document.content,
    fftSize: 2048,
    symbolCount,
    prefixSamples: [160, 144, 144, 144, 144, 144, 144],
    overlapSamples: 32,
    tray: [
      bare,
      data(1, 'QPSK', 'qpsk'),
      data(2, '16-QAM', '16qam'),
      data(3, '64-QAM', '64qam'),
      data(4, '256-QAM', '256qam'),
      data(5, '1024-QAM', '1024qam'),
      data(6, '4096-QAM', '4096qam'),
      data(7, 'QPSK, raised', 'qpsk', 3),
      goldPilot(8, 77),
      tone(9, 15),
      { inkId: 'k10', name: 'Reserved', role: 'reserved', powerDb: 0, value: null },
    ],
    grid: grid(symbolCount, (symbol) => {
      const fills = [...(symbol < 2 ? opening : blocks(symbol >= 8 && symbol < 11)), ...edges];
      const pass = pilotSymbols.indexOf(symbol);
      return row(2048, fills, pass < 0 ? null : { ink: 8, at: steps(-588 + (pass % 2) * 6, 588, 12), spares: 9 });
    }),
    markers: [{ name: 'Frame', at: 'repeat', symbol: null, offsetSamples: 0, lengthSamples: 64 }],
  };
  document.intent = {
    outputRmsDbm: -24,
    lossDb: 20.6,
    devicePeakLimitDbm: -10,
    deviceMeanLimitDbm: -18,
    levelToleranceDb: 1,
  };
  return document;
}

/** A receiver's echo test: one constellation, a long prefix, pilots on a shifted comb. */
export function echoTest(): WaveformDocument {
  const symbolCount = 12;
  const document = emptyDocument({ title: 'Echo test 13.5 MHz, long prefix', notes: 'Invented for the demo.' });
  document.content = {
    ...document.content,
    fftSize: 1536,
    symbolCount,
    prefixSamples: [384],
    tray: [bare, data(1, '16-QAM', '16qam'), goldPilot(2, 12)],
    grid: grid(symbolCount, (symbol) =>
      row(
        1536,
        [
          [-450, -1, 1],
          [1, 450, 1],
        ],
        symbol % 4 === 0 ? { ink: 2, at: steps(-450 + ((symbol / 4) % 2) * 3, 450, 6) } : null,
      ),
    ),
  };
  document.intent = { ...newIntent(), outputRmsDbm: -30, lossDb: 10, devicePeakLimitDbm: -10, deviceMeanLimitDbm: -20 };
  return document;
}

/** A front end's test: three tones, two narrow blocks between them. */
export function threeTones(): WaveformDocument {
  const symbolCount = 10;
  const document = emptyDocument({ title: 'Front end, three tones and two blocks', notes: 'Invented for the demo.' });
  document.content = {
    ...document.content,
    fftSize: 1024,
    symbolCount,
    prefixSamples: [72],
    tray: [bare, data(1, 'QPSK', 'qpsk'), tone(2, 12), tone(3, 12, 120)],
    grid: grid(symbolCount, () =>
      row(1024, [
        [-280, -280, 2],
        [-180, -100, 1],
        [-1, -1, 3],
        [100, 180, 1],
        [280, 280, 2],
      ]),
    ),
  };
  return document;
}
