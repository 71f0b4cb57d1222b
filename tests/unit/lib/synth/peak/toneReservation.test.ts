import { createSentValues, createSymbolSynthesis, type Ink, type WaveformContent } from '@/lib/synth';
import { NULL_INK, dataInk, pnStream, rowOf, smallContent } from '../../../../helpers/content';
import { directTransform, relativeDb } from '../../../../helpers/directTransform';
import { openTestEngine } from '../../../../helpers/sampleEngine';

const reserved: Ink = { inkId: 'k2', name: 'reserved', role: 'reserved', powerDb: 0, value: null };

/** 512 subcarriers, 31 of them (6 %) reserved in places drawn once from a register. */
function reservedHere(): Set<number> {
  const places = new Set<number>();
  let state = 1;
  while (places.size < 31) {
    for (let i = 0; i < 9; i++) state = ((state << 1) | (((state >> 22) ^ (state >> 17)) & 1)) & 0x7fffff;
    places.add((state & 511) - 256);
  }
  return places;
}

function frame(symbols: number, changes: Partial<WaveformContent> = {}): WaveformContent {
  const places = reservedHere();
  return smallContent({
    fftSize: 512,
    symbolCount: symbols,
    tray: [NULL_INK, dataInk(1, { constellation: 'qpsk', bitMap: 'ts38211', streamId: 's0' }), reserved],
    streams: [pnStream(0, { fill: 'anchored' })],
    grid: { rows: [rowOf(512, (k) => (places.has(k) ? 2 : 1))], rowOfSymbol: new Array<number>(symbols).fill(0) },
    peakReduction: { kind: 'toneReservation', targetPaprDb: 7, iterations: 10 },
    ...changes,
  });
}

/** PAPR of each symbol on the interpolated waveform, over its own mean. */
function symbolPaprs(content: WaveformContent): number[] {
  const synthesis = createSymbolSynthesis(content, { oversampling: 4, engine: openTestEngine() });
  const useful = new Float64Array(2 * 4 * content.fftSize);
  return Array.from({ length: content.symbolCount }, (_, symbol) => {
    synthesis.useful(0, symbol, useful);
    let peak = 0;
    let sum = 0;
    for (let i = 0; i < useful.length; i += 2) {
      const power = useful[i]! ** 2 + useful[i + 1]! ** 2;
      peak = Math.max(peak, power);
      sum += power;
    }
    return 10 * Math.log10((peak * (useful.length / 2)) / sum);
  });
}

test('6 % of 512 subcarriers lower the PAPR that one symbol in a hundred passes by 2 dB, and no symbol is raised', () => {
  // common practice: 2 to 4 dB for pseudo-randomly placed reserved tones (from memory)
  const content = frame(200);
  const before = symbolPaprs({ ...content, peakReduction: { kind: 'none' } });
  const after = symbolPaprs(content);
  expect(before.filter((papr, symbol) => after[symbol]! > papr + 1e-9)).toEqual([]);
  const atOneInHundred = (paprs: number[]) => [...paprs].sort((a, b) => b - a)[1]!;
  expect(atOneInHundred(before) - atOneInHundred(after)).toBeGreaterThan(2);
});

test('cells that are not reserved keep their values, to the bit where they are listed and to −290 dB where they are rendered', () => {
  const content = frame(4, {
    fftSize: 64,
    grid: { rows: [rowOf(64, (k) => (k % 9 === 4 ? 2 : 1))], rowOfSymbol: [0, 0, 0, 0] },
    peakReduction: { kind: 'toneReservation', targetPaprDb: 3, iterations: 7 },
  });
  const values = createSentValues(content);
  const synthesis = createSymbolSynthesis(content);
  const useful = new Float64Array(128);
  const meant = new Float64Array(128);
  const sent = new Float64Array(128);
  for (let symbol = 0; symbol < 4; symbol++) {
    values.meant.write(0, symbol, meant);
    values.write(0, symbol, sent);
    synthesis.useful(0, symbol, useful);
    const bins = directTransform(useful, -1);
    const kept: number[] = [];
    const found: number[] = [];
    let filled = 0;
    for (let p = 0; p < 64; p++) {
      if ((p - 32) % 9 === 4 || (p - 32) % 9 === -5) {
        filled += Math.hypot(sent[2 * p]!, sent[2 * p + 1]!);
        continue;
      }
      const bin = 2 * ((p + 32) % 64);
      kept.push(meant[2 * p]!, meant[2 * p + 1]!);
      found.push(bins[bin]! / 8, bins[bin + 1]! / 8);
      expect([sent[2 * p], sent[2 * p + 1]]).toEqual([meant[2 * p], meant[2 * p + 1]]);
    }
    expect(filled).toBeGreaterThan(0.1);
    expect(relativeDb(Float64Array.from(found), Float64Array.from(kept))).toBeLessThan(-290);
  }
});
