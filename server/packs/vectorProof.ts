import { createHash, type Hash } from 'node:crypto';
import {
  createCellPower,
  createCellValues,
  createDemodulator,
  createEvmMeter,
  createReconstructedPeak,
  createSynthesis,
  createVectorForm,
  createVectorGather,
  createWordReader,
  createWordWriter,
  type BenchContent,
  type EvmReport,
  type ReconstructedPeak,
  type SaturationCount,
  type UnpaintedLine,
  type VectorFile,
  type WaveformContent,
  type WordScale,
} from '@/lib/synth';
import { sampleEngine } from '../sampleEngine.ts';
import type { StepOptions } from './measureRendering.ts';
import { PackError, throwIfCancelled } from './packError.ts';
import { readVector, type VectorPlace, type VectorReading } from './vectorPlaces.ts';
import { createYielder } from './yielder.ts';

/** What reading the finished file, or both files, back gave. */
export interface VectorProof {
  /** Of the one file; of two: of I's bytes with Q's behind them. */
  sha256: string;
  /** Of the first file. */
  sha512: string;
  files: { role: VectorFile['role']; ending: VectorFile['ending']; bytes: number; sha256: string }[];
  /** The first four samples of each file, heads left out. */
  firstParts: Uint8Array[];
  /** Files whose head is not the one that their samples ask for. */
  headsDiffer: number;
  samplesRead: number;
  wordsCompared: number;
  wordsDifferent: number;
  saturated: SaturationCount;
  /** Mean of the words over full scale. */
  dcI: number;
  dcQ: number;
  evm: EvmReport;
  /** Ink numbers that carry energy of their own: what the EVM is over. */
  comparedInks: number[];
  worstUnpainted: UnpaintedLine | null;
  /** Of the words over full scale: power 1 is 0 dBFS. */
  reconstructedPeak: ReconstructedPeak;
}

const blockSamples = 1 << 16;
const firstSamples = 4;
/** The demodulation's part of the whole reading, the rest is the peak between the samples. */
const demodulationShare = 0.7;

/**
 * Reads a vector from its bytes, compares every word with a second synthesis and demodulates it with known timing, no fit of gain,
 * phase or channel. Nothing of the first pass is used but the scale, so that a mistake in writing cannot hide itself.
 */
export async function proveVector(
  content: WaveformContent,
  bench: BenchContent,
  scale: WordScale,
  places: readonly VectorPlace[],
  options: StepOptions = {},
): Promise<VectorProof> {
  const synthesis = createSynthesis(content, { engine: sampleEngine() });
  const values = createCellValues(content);
  const { fftSize } = content;
  const writer = createWordWriter(bench, scale);
  const reader = createWordReader(bench);
  const comparedInks = content.tray.flatMap(({ role }, ink) => (role === 'null' || role === 'reserved' ? [] : [ink]));
  const meter = createEvmMeter({
    fftSize,
    symbolCount: content.symbolCount,
    inkCount: content.tray.length,
    inks: comparedInks,
    estimate: 'none',
    cellsWords: 'all cells of data, pilot and tone inks',
  });
  const lines = createCellPower(content, values.cells);
  const meant = new Float64Array(2 * fftSize);
  const demodulator = createDemodulator(content, (repeat, symbol, foundValues) => {
    values.write(repeat, symbol, meant);
    meter.add(symbol, values.cells.subarray(symbol * fftSize, (symbol + 1) * fftSize), foundValues, meant);
    lines.add(symbol, foundValues);
    if (symbol === content.symbolCount - 1) meter.endFrame();
  });
  const form = createVectorForm(content, bench);
  const gather = createVectorGather(bench);
  const { files } = form;
  const reading = readVector(files, places);
  const words = new Float64Array(2 * blockSamples);
  const expected = new Uint8Array(blockSamples * writer.bytesPerSample);
  const hashes = files.map(() => createHash('sha256'));
  const sha512 = createHash('sha512');
  const digest = (parts: readonly Uint8Array[]) => {
    parts.forEach((part, i) => hashes[i]!.update(part));
    sha512.update(parts[0]!);
  };
  const headsDiffer = await reading.headsDiffer();
  digest(await reading.heads());
  let firstParts: Uint8Array[] = [];
  let samplesRead = 0;
  let wordsDifferent = 0;
  let sumI = 0;
  let sumQ = 0;
  const wholeSamples = reading.samples;
  if (wholeSamples === 0) throw new PackError('proof_failed', 'Not offered: the file has no whole sample.');
  while (samplesRead < wholeSamples) {
    throwIfCancelled(options.signal);
    const count = Math.min(blockSamples, wholeSamples - samplesRead);
    const stored = await reading.read(samplesRead, count);
    digest(stored);
    if (samplesRead === 0)
      firstParts = files.map(({ bytesPerSample }, i) => stored[i]!.slice(0, firstSamples * bytesPerSample));
    const got = synthesis.readWords(writer, count, expected);
    // A file longer than the synthesis has words that nothing rendered: each counts as different.
    wordsDifferent += 2 * (count - got);
    form.form(expected, got).forEach((meant, i) => {
      const { bytesPerSample, wordsPerSample } = files[i]!;
      wordsDifferent += countDifferent(stored[i]!.subarray(0, meant.length), meant, bytesPerSample / wordsPerSample);
    });
    reader.readWords(gather.gather(stored, count), 0, count, words);
    for (let i = 0; i < 2 * count; i += 2) {
      sumI += words[i]!;
      sumQ += words[i + 1]!;
    }
    for (let i = 0; i < 2 * count; i++) words[i] = words[i]! / scale.scale;
    demodulator.push(words, count);
    samplesRead += count;
    options.onProgress?.((demodulationShare * samplesRead) / wholeSamples);
  }
  // A rest that is no whole sample belongs to the digest and is a wrong word.
  const rests = await reading.rests();
  digest(rests);
  wordsDifferent += rests.filter(({ length }) => length > 0).length;
  const isExpected = wordsDifferent === 0 && wholeSamples === synthesis.samples;
  const excerpt = excerptOf(content, isExpected && values.isRepeatAlike, wholeSamples, synthesis.layout.repeatSamples);
  const perWord = Math.max(1, samplesRead) * scale.fullScale;
  return {
    sha256: await jointDigest(hashes, places),
    sha512: sha512.digest('hex'),
    files: files.map(({ role, ending }, i) => ({
      role,
      ending,
      bytes: places[i]!.bytes,
      sha256: hashes[i]!.digest('hex'),
    })),
    firstParts,
    headsDiffer,
    samplesRead,
    wordsCompared: 2 * samplesRead,
    wordsDifferent,
    saturated: { ...writer.saturated },
    dcI: sumI / perWord,
    dcQ: sumQ / perWord,
    evm: meter.report(),
    comparedInks,
    worstUnpainted: lines.worstUnpainted(),
    reconstructedPeak: await findPeak(content, bench, scale, reading, files, excerpt, {
      signal: options.signal,
      onProgress: (ratio) => options.onProgress?.(demodulationShare + (1 - demodulationShare) * ratio),
    }),
  };
}

/** The digest of all files, one behind the other: the first one's goes on with the second's bytes, read once more. */
async function jointDigest(hashes: Hash[], places: readonly VectorPlace[]): Promise<string> {
  const joint = hashes[0]!.copy();
  const block = new Uint8Array(1 << 20);
  for (const { handle, offsetBytes, bytes } of places.slice(1)) {
    for (let done = 0; done < bytes;) {
      const { bytesRead } = await handle.read(block, 0, Math.min(block.length, bytes - done), offsetBytes + done);
      if (bytesRead === 0) throw new Error('The vector ended before its size.');
      joint.update(block.subarray(0, bytesRead));
      done += bytesRead;
    }
  }
  return joint.digest('hex');
}

interface Excerpt {
  samples: number;
  /** Where a sample of the excerpt lies in the file, and how many follow it there. */
  placeOf: (sample: number) => { at: number; following: number };
}

/**
 * The part of a file that holds all of its waveform. Where every repeat has the same words (each was just compared with a rendering whose
 * repeats are alike), a loop without pad is its first repeat played again and again, and any other file its first two repeats and its last
 * one: a thousand repeats cost no more than three.
 */
function excerptOf(content: WaveformContent, isRepeatAlike: boolean, samples: number, repeatSamples: number): Excerpt {
  const whole: Excerpt = { samples, placeOf: (at) => ({ at, following: samples - at }) };
  const { repeats, mode, padSamples } = content.timing;
  if (!isRepeatAlike || content.frequencyOffsetHz !== 0 || samples < repeats * repeatSamples) return whole;
  if (mode === 'loop' && padSamples === 0)
    return { samples: repeatSamples, placeOf: (at) => ({ at, following: repeatSamples - at }) };
  if (repeats <= 3) return whole;
  const border = 2 * repeatSamples;
  const left = (repeats - 3) * repeatSamples;
  return {
    samples: samples - left,
    placeOf: (at) =>
      at < border ? { at, following: border - at } : { at: at + left, following: samples - (at + left) },
  };
}

/** The peak between the samples of the file as it is, by lib/synth's own method; reads where that asks. */
async function findPeak(
  content: WaveformContent,
  bench: BenchContent,
  scale: WordScale,
  reading: VectorReading,
  files: readonly VectorFile[],
  excerpt: Excerpt,
  options: StepOptions,
): Promise<ReconstructedPeak> {
  const reader = createWordReader(bench);
  const gather = createVectorGather(bench);
  let parts: Uint8Array[] = [];
  let room = 0;
  const source = {
    samples: excerpt.samples,
    read(first: number, count: number, out: Float64Array) {
      if (room < count) {
        parts = files.map(({ bytesPerSample }) => new Uint8Array(count * bytesPerSample));
        room = count;
      }
      for (let done = 0; done < count;) {
        const { at, following } = excerpt.placeOf(first + done);
        const part = Math.min(count - done, following);
        reading.readNow(at, part, parts, done);
        done += part;
      }
      reader.readWords(gather.gather(parts, count), 0, count, out);
      for (let i = 0; i < 2 * count; i++) out[i] = out[i]! / scale.fullScale;
    },
  };
  const measuring = createReconstructedPeak(source, content.timing.mode);
  const giveWay = createYielder();
  while (measuring.step()) {
    throwIfCancelled(options.signal);
    options.onProgress?.(measuring.doneSteps / measuring.totalSteps);
    await giveWay();
  }
  return measuring.result();
}

function countDifferent(a: Uint8Array, b: Uint8Array, wordBytes: number): number {
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
