import { createHash } from 'node:crypto';
import {
  createCellPower,
  createCellValues,
  vectorFiles,
  type BenchContent,
  type EvmReport,
  type ReconstructedPeak,
  type SaturationCount,
  type UnpaintedLine,
  type VectorFile,
  type WaveformContent,
  type WordScale,
} from '@/lib/synth';
import { digestPlace } from './fileDigest.ts';
import type { StepOptions } from './measureRendering.ts';
import { PackError, throwIfCancelled } from './packError.ts';
import { comparedInksOf, countDifferent, createProofMeter } from './pool/stretchProof.ts';
import { cutPiece, planVector, type FilePiece, type FilePlan } from './pool/stretchPlan.ts';
import { inOrder, type WorkPool } from './pool/workPool.ts';
import type { BytePlace } from './pool/workTasks.ts';
import { readAhead, readInto, readVector, type VectorPlace } from './vectorPlaces.ts';

/** What reading the finished file, or both files, back gave. */
export interface VectorProof {
  /** Of the one file; of two: of I's bytes with Q's behind them. */
  sha256: string;
  /** Of the first file. */
  sha512: string;
  files: {
    role: VectorFile['role'];
    ending: VectorFile['ending'];
    bytes: number;
    sha256: string;
  }[];
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

const firstSamples = 4;
/** The comparing threads' part of the whole reading; the rest is reading for the digests. */
const comparingShare = 0.7;

/**
 * Reads a vector from its bytes, compares every word with a second synthesis and demodulates it with known timing, no fit of gain,
 * phase or channel. Nothing of the first pass is used but the scale, so that a mistake in writing cannot hide itself. The words of a
 * repeat that is a copy are compared with the bytes of the repeat that it copies, down to the one that was compared with the synthesis.
 */
export async function proveVector(
  pool: WorkPool,
  content: WaveformContent,
  bench: BenchContent,
  scale: WordScale,
  places: readonly VectorPlace[],
  options: StepOptions = {},
): Promise<VectorProof> {
  const files = vectorFiles(content, bench);
  const reading = readVector(files, places);
  const { samples } = reading;
  if (samples === 0) throw new PackError('proof_failed', 'Not offered: the file has no whole sample.');
  const plan = clipPlan(planVector(content, bench), samples);
  const stop = new AbortController();
  const shares = [comparingShare, 1 - comparingShare];
  const done = [0, 0];
  const part = (number: 0 | 1) => ({
    check() {
      throwIfCancelled(stop.signal);
      throwIfCancelled(options.signal);
    },
    onProgress(ratio: number) {
      done[number] = ratio;
      options.onProgress?.(shares[0]! * done[0]! + shares[1]! * done[1]!);
    },
  });
  const headsDiffer = await reading.headsDiffer();
  const firstParts = await reading.first(firstSamples);
  const bytePlaces = places.map(({ handle: { fd }, offsetBytes, bytes }) => ({ fd, offsetBytes, bytes }));

  const [compared, digests, sha512] = await together(stop, [
    compareStretches(pool, content, scale, plan, { samples, places: bytePlaces }, part(0)),
    digestFiles(files, places, plan, part(1)),
    digestPlace(pool, 'vector', 'sha512', bytePlaces[0]!, part(1).check),
  ]);

  // A file longer than the synthesis has words that nothing rendered: each counts as different, a rest that is no sample as one.
  const tooMany = 2 * Math.max(0, samples - plan.layout.samples);
  const perWord = Math.max(1, samples) * scale.fullScale;
  return {
    sha256: digests.sha256,
    sha512,
    files: digests.files,
    firstParts,
    headsDiffer,
    samplesRead: samples,
    wordsCompared: 2 * samples,
    wordsDifferent: compared.wordsDifferent + digests.wordsDifferent + tooMany + reading.rests,
    saturated: compared.saturated,
    dcI: compared.sumI / perWord,
    dcQ: compared.sumQ / perWord,
    evm: compared.evm,
    comparedInks: comparedInksOf(content),
    worstUnpainted: compared.worstUnpainted,
    reconstructedPeak: compared.reconstructedPeak,
  };
}

/** Waits for all. The first one that fails gives the others up, and is thrown when they have ended: none reads a file that is closed by then. */
async function together<Results extends unknown[]>(
  stop: AbortController,
  works: { [I in keyof Results]: Promise<Results[I]> },
): Promise<Results> {
  let failure: { error: unknown } | null = null;
  for (const work of works) {
    work.catch((error: unknown) => {
      failure ??= { error };
      stop.abort();
    });
  }
  await Promise.allSettled(works);
  if (failure) throw (failure as { error: unknown }).error;
  return Promise.all(works) as Promise<Results>;
}

/** What there is of a plan in a file of so many samples. */
function clipPlan({ layout, head, copies, tail }: FilePlan, samples: number): FilePlan {
  const clip = (pieces: FilePiece[]) =>
    pieces.map((piece) => ({ ...piece, end: Math.min(piece.end, samples) })).filter(({ from, end }) => end > from);
  const isCopied = copies !== null && samples > copies.from;
  return {
    layout,
    head: clip(head),
    copies: isCopied ? { ...copies, end: Math.min(copies.end, samples) } : null,
    tail: clip(tail),
  };
}

interface PartOptions {
  /** Throws once the work is given up. */
  check(): void;
  onProgress(ratio: number): void;
}

/** What the pool finds: every rendered stretch against a second synthesis, its cells, and the peak between the samples. */
async function compareStretches(
  pool: WorkPool,
  content: WaveformContent,
  scale: WordScale,
  { layout, head, tail }: FilePlan,
  { samples, places: files }: { samples: number; places: BytePlace[] },
  { check, onProgress }: PartOptions,
) {
  const meter = createProofMeter(content);
  const lines = createCellPower(content, createCellValues(content).cells);
  const found = { wordsDifferent: 0, saturated: { components: 0, samples: 0 }, sumI: 0, sumQ: 0 };
  const pieces = [...head, ...tail];
  const all = pieces.reduce((sum, { from, end }) => sum + end - from, 0);
  let compared = 0;
  for (const piece of pieces) {
    const tasks = (function* () {
      for (const stretch of cutPiece(layout, piece)) yield { task: { kind: 'proof' as const, scale, stretch, files } };
    })();
    await inOrder<'proof'>(pool, tasks, (proof, { stretch: { from, end } }) => {
      found.wordsDifferent += proof.wordsDifferent;
      found.saturated.components += piece.times * proof.saturated.components;
      found.saturated.samples += piece.times * proof.saturated.samples;
      found.sumI += piece.times * proof.sumI;
      found.sumQ += piece.times * proof.sumQ;
      meter.take(proof.evm, piece.times);
      lines.take(proof.lines, piece.times);
      compared += end - from;
      onProgress((0.9 * compared) / all);
      check();
    });
  }
  const reconstructedPeak = await pool.run<'peak'>({ kind: 'peak', scale, files, samples });
  onProgress(1);
  return { ...found, evm: meter.report(), worstUnpainted: lines.worstUnpainted(), reconstructedPeak };
}

/** SHA-256 of every byte, in order; on the way, copied samples are compared with what they copy. */
async function digestFiles(
  files: readonly VectorFile[],
  places: readonly VectorPlace[],
  { copies }: FilePlan,
  { check, onProgress }: PartOptions,
) {
  const all = places.reduce((sum, { bytes }) => sum + bytes, 0);
  let joint = createHash('sha256');
  let wordsDifferent = 0;
  let read = 0;
  const found: VectorProof['files'] = [];
  for (const [i, { role, ending, head, bytesPerSample, wordsPerSample }] of files.entries()) {
    const { handle, offsetBytes, bytes } = places[i]!;
    const own = createHash('sha256');
    const end = offsetBytes + bytes;
    const at = (sample: number): number => offsetBytes + head.length + sample * bytesPerSample;
    const copied =
      copies === null
        ? { from: end, end, back: 0 }
        : { from: at(copies.from), end: at(copies.end), back: copies.cycleSamples * bytesPerSample };
    const earlier = new Uint8Array(1 << 20);
    for (const [from, to] of [
      [offsetBytes, copied.from],
      [copied.from, copied.end],
      [copied.end, end],
    ] as const) {
      let position = from;
      for await (const block of readAhead(handle, from, to)) {
        check();
        own.update(block);
        if (i > 0) joint.update(block);
        if (from === copied.from && to === copied.end) {
          await readInto(handle, earlier, block.length, position - copied.back);
          const words = bytesPerSample / wordsPerSample;
          wordsDifferent += countDifferent(block, earlier.subarray(0, block.length), words);
        }
        position += block.length;
        onProgress((read += block.length) / all);
      }
    }
    if (i === 0) joint = own.copy();
    found.push({ role, ending, bytes, sha256: own.digest('hex') });
  }
  return { files: found, sha256: joint.digest('hex'), wordsDifferent };
}
