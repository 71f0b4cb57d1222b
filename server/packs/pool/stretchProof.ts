import {
  createCellPower,
  createDemodulator,
  createEvmMeter,
  createSentValues,
  createVectorForm,
  createVectorGather,
  createWordReader,
  createWordWriter,
  type BenchContent,
  type CellPower,
  type EvmMeter,
  type Synthesis,
  type WaveformContent,
} from '@/lib/synth';
import { createSampleReader } from './bytePlaces.ts';
import type { StretchProof, TaskOf } from './workTasks.ts';

const blockSamples = 1 << 15;

/** Ink numbers that carry energy of their own: what the EVM is over. */
export const comparedInksOf = ({ tray }: WaveformContent): number[] =>
  tray.flatMap(({ role }, ink) => (role === 'null' || role === 'reserved' ? [] : [ink]));

/** The meter of a proof: no fit of gain, phase or channel. */
export const createProofMeter = (content: WaveformContent): EvmMeter =>
  createEvmMeter({
    fftSize: content.fftSize,
    symbolCount: content.symbolCount,
    inkCount: content.tray.length,
    inks: comparedInksOf(content),
    estimate: 'none',
    bySubcarrier: false,
    cellsWords: 'all cells of data, pilot and tone inks',
  });

/** Words of `wordBytes` bytes that differ. */
export function countDifferent(a: Uint8Array, b: Uint8Array, wordBytes: number): number {
  if (Buffer.compare(a, b) === 0) return 0;
  let different = 0;
  for (let at = 0; at < a.length; at += wordBytes) {
    for (let i = 0; i < wordBytes; i++) {
      if (a[at + i] === b[at + i]) continue;
      different += 1;
      break;
    }
  }
  return different;
}

/**
 * Reads a stretch of a finished vector from its bytes, compares every word with a second synthesis and demodulates it with known timing.
 * Nothing of the first pass is used but the scale, so that a mistake in writing cannot hide itself.
 */
export function createStretchProof(
  content: WaveformContent,
  bench: BenchContent,
  synthesis: Synthesis,
  powerBefore: () => number,
) {
  const { fftSize, symbolCount } = content;
  // what a lowered peak sent, so that a wrong word shows as one and not as the reduction's own cost
  const values = createSentValues(content, { powerBefore });
  const meant = new Float64Array(2 * fftSize);
  const form = createVectorForm(content, bench);
  const gather = createVectorGather(bench);
  const reader = createWordReader(bench);
  const { files } = form;
  const words = new Float64Array(2 * blockSamples);
  let meter: EvmMeter;
  let lines: CellPower;
  const demodulator = createDemodulator(content, (repeat, symbol, found) => {
    values.write(repeat, symbol, meant);
    meter.add(symbol, values.cells.subarray(symbol * fftSize, (symbol + 1) * fftSize), found, meant);
    lines.add(symbol, found);
    if (symbol === symbolCount - 1) meter.endFrame();
  });

  return ({ scale, stretch: { from, end }, files: places }: TaskOf<'proof'>): StretchProof => {
    meter = createProofMeter(content);
    lines = createCellPower(content, values.cells);
    const writer = createWordWriter(bench, scale);
    const expected = new Uint8Array(blockSamples * writer.bytesPerSample);
    const sampleReader = createSampleReader(files, places);
    const room = sampleReader.room(blockSamples);
    let wordsDifferent = 0;
    let sumI = 0;
    let sumQ = 0;
    if (synthesis.position !== from) synthesis.seek(from);
    form.seek(from);
    demodulator.seek(from);
    for (let at = from; at < end; at += blockSamples) {
      const count = Math.min(blockSamples, end - at);
      sampleReader.read(at, count, 0);
      synthesis.readWords(writer, count, expected);
      form.form(expected, count).forEach((part, i) => {
        const { bytesPerSample, wordsPerSample } = files[i]!;
        wordsDifferent += countDifferent(room[i]!.subarray(0, part.length), part, bytesPerSample / wordsPerSample);
      });
      reader.readWords(gather.gather(room, count), 0, count, words);
      for (let i = 0; i < 2 * count; i += 2) {
        sumI += words[i]!;
        sumQ += words[i + 1]!;
      }
      for (let i = 0; i < 2 * count; i++) words[i] = words[i]! / scale.scale;
      demodulator.push(words, count);
    }
    return { wordsDifferent, saturated: writer.saturated, sumI, sumQ, evm: meter.sums, lines: lines.sums };
  };
}
