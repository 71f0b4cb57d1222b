import { createHash } from 'node:crypto';
import { readSync } from 'node:fs';
import type { FileHandle } from 'node:fs/promises';
import {
  createCellPower,
  createCellValues,
  createDemodulator,
  createEvmMeter,
  createReconstructedPeak,
  createSynthesis,
  createWordReader,
  createWordWriter,
  type BenchContent,
  type EvmReport,
  type ReconstructedPeak,
  type SaturationCount,
  type UnpaintedLine,
  type WaveformContent,
  type WordScale,
} from '@/lib/synth';
import { sampleEngine } from '../sampleEngine.ts';
import type { StepOptions } from './measureRendering.ts';
import { throwIfCancelled } from './packError.ts';
import { createYielder } from './yielder.ts';

/** Where a finished vector lies: a file, or a stored entry of a pack. */
export interface VectorPlace {
  handle: FileHandle;
  offsetBytes: number;
  bytes: number;
}

/** What reading the finished file back gave. */
export interface VectorProof {
  sha256: string;
  sha512: string;
  /** Its first bytes, as many as eight words of any kind take. */
  head: Uint8Array;
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
const headBytes = 32;
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
  place: VectorPlace,
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
  const size = reader.bytesPerSample;
  const words = new Float64Array(2 * blockSamples);
  const expected = new Uint8Array(blockSamples * size);
  const found = new Uint8Array(blockSamples * size);
  const sha256 = createHash('sha256');
  const sha512 = createHash('sha512');
  let head = new Uint8Array(0);
  let samplesRead = 0;
  let wordsDifferent = 0;
  let sumI = 0;
  let sumQ = 0;
  const wholeSamples = Math.floor(place.bytes / size);
  while (samplesRead < wholeSamples) {
    throwIfCancelled(options.signal);
    const count = Math.min(blockSamples, wholeSamples - samplesRead);
    const bytes = count * size;
    await readInto(place.handle, found, bytes, place.offsetBytes + samplesRead * size);
    const stored = found.subarray(0, bytes);
    sha256.update(stored);
    sha512.update(stored);
    if (samplesRead === 0) head = stored.slice(0, headBytes);
    const got = synthesis.readWords(writer, count, expected);
    // A file longer than the synthesis has words that nothing rendered: each counts as different.
    wordsDifferent +=
      countDifferent(stored.subarray(0, got * size), expected.subarray(0, got * size), size / 2) + 2 * (count - got);
    reader.readWords(stored, 0, count, words);
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
  const restBytes = place.bytes - wholeSamples * size;
  if (restBytes > 0) {
    const rest = new Uint8Array(restBytes);
    await readInto(place.handle, rest, restBytes, place.offsetBytes + wholeSamples * size);
    sha256.update(rest);
    sha512.update(rest);
    wordsDifferent += 1;
  }
  const isExpected = wordsDifferent === 0 && wholeSamples === synthesis.samples;
  const excerpt = excerptOf(content, isExpected && values.isRepeatAlike, wholeSamples, synthesis.layout.repeatSamples);
  const perWord = Math.max(1, samplesRead) * scale.fullScale;
  return {
    sha256: sha256.digest('hex'),
    sha512: sha512.digest('hex'),
    head,
    samplesRead,
    wordsCompared: 2 * samplesRead,
    wordsDifferent,
    saturated: { ...writer.saturated },
    dcI: sumI / perWord,
    dcQ: sumQ / perWord,
    evm: meter.report(),
    comparedInks,
    worstUnpainted: lines.worstUnpainted(),
    reconstructedPeak: await findPeak(content, bench, scale, place, excerpt, {
      signal: options.signal,
      onProgress: (ratio) => options.onProgress?.(demodulationShare + (1 - demodulationShare) * ratio),
    }),
  };
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
  place: VectorPlace,
  excerpt: Excerpt,
  options: StepOptions,
): Promise<ReconstructedPeak> {
  const reader = createWordReader(bench);
  const size = reader.bytesPerSample;
  let bytes = new Uint8Array(0);
  const source = {
    samples: excerpt.samples,
    read(first: number, count: number, out: Float64Array) {
      if (bytes.length < count * size) bytes = new Uint8Array(count * size);
      for (let done = 0; done < count;) {
        const { at, following } = excerpt.placeOf(first + done);
        const part = Math.min(count - done, following);
        readBytesNow(place, bytes, done * size, part * size, at * size);
        done += part;
      }
      reader.readWords(bytes, 0, count, out);
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

function readBytesNow(place: VectorPlace, into: Uint8Array, at: number, bytes: number, position: number): void {
  for (let done = 0; done < bytes;) {
    const got = readSync(place.handle.fd, into, at + done, bytes - done, place.offsetBytes + position + done);
    if (got === 0) throw new Error('The vector ended before its size.');
    done += got;
  }
}

async function readInto(handle: FileHandle, into: Uint8Array, bytes: number, position: number): Promise<void> {
  for (let done = 0; done < bytes;) {
    const { bytesRead } = await handle.read(into, done, bytes - done, position + done);
    if (bytesRead === 0) throw new Error('The vector ended before its size.');
    done += bytesRead;
  }
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
