import { open, rename, rm, stat, writeFile } from 'node:fs/promises';
import path from 'node:path';
import {
  captureReadings,
  createImpairedCapture,
  createWordWriter,
  deriveFigures,
  fullScaleOf,
  type BenchContent,
  type SampleSource,
} from '@/lib/synth';
import { PackError } from '../packs/packError.ts';
import type { ImpairCommand } from './captureArguments.ts';
import { mostCaptureBytes } from './captureFiles.ts';
import { done, refused, type Outcome } from './outcome.ts';
import { openPack, type OpenPack } from './packContents.ts';
import { reasonOf } from './readInputs.ts';

const blockSamples = 32768;
const mostDefaultSamples = 2 ** 26;

/** impair pack.zip --out capture: the pack's vector as a receiver might record it, the same bytes for the same seed. */
export async function impair(command: ImpairCommand, signal: AbortSignal): Promise<Outcome> {
  if (await isSameFile(command.pack, command.out))
    return refused('invalid', `${command.out}: the capture would replace the pack. Give another name with --out.`);
  let pack: OpenPack;
  try {
    pack = await openPack(command.pack);
  } catch (error) {
    if (error instanceof PackError) return refused(error.code, `${command.pack}: ${error.message}`, error.issues);
    return refused('io_failed', `${command.pack}: ${reasonOf(error)}.`);
  }
  try {
    return await write(command, pack, signal);
  } finally {
    await pack.close();
  }
}

/** The same file under either name, links too. */
async function isSameFile(one: string, other: string): Promise<boolean> {
  try {
    const [a, b] = [await stat(one), await stat(other)];
    return a.ino === b.ino && a.dev === b.dev;
  } catch {
    return false;
  }
}

async function write(command: ImpairCommand, pack: OpenPack, signal: AbortSignal): Promise<Outcome> {
  const source = await vectorSource(pack);
  const { content } = pack.document;
  const { sampleClockHz, highestSubcarrier, lowestSubcarrier } = deriveFigures(content);
  const [p, q] = command.impairments.clockRatio;
  if (source.samples !== pack.manifest.samples.fileSamples)
    return refused(
      'invalid',
      `${command.pack}: the pack is damaged: its vector has ${counted(source.samples)}, its manifest says ${pack.manifest.samples.fileSamples}.`,
    );
  const captureHz = (sampleClockHz * p) / q;
  if (Math.abs(command.impairments.frequencyOffsetHz) > captureHz / 2)
    return refused(
      'invalid',
      `--offset ${command.impairments.frequencyOffsetHz} Hz is beyond half of the capture's clock of ${Number(captureHz.toPrecision(15))} Hz: it would come back at another place.`,
    );
  const asked =
    command.samples ?? Math.ceil(((source.samples + Math.max(0, command.impairments.delaySamples)) * p) / q);
  const samples = command.samples ?? Math.min(asked, mostDefaultSamples);
  const bench = { ...pack.profile.content, ...command.layout, container: 'raw', layout: 'interleaved' } as BenchContent;
  const scale = fullScaleOf(bench);
  const writer = createWordWriter(bench, { scale, fullScale: scale, referenceLevel: 1, isSilent: false });
  if (samples * writer.bytesPerSample > mostCaptureBytes)
    return refused('too_large', `${samples} samples are more than 2 GB: ask for fewer with --samples.`);
  const edge = Math.max(Math.abs(highestSubcarrier ?? 0), Math.abs(lowestSubcarrier ?? 0)) + 1;
  const capture = createImpairedCapture(
    {
      source,
      clockHz: sampleClockHz,
      mode: content.timing.mode,
      meanPower: activePower(pack),
      usedTurns: Math.min(
        0.48,
        edge / (content.fftSize * content.oversampling) + Math.abs(content.frequencyOffsetHz) / sampleClockHz,
      ),
    },
    command.impairments,
  );
  const part = `${command.out}.part`;
  const block = new Float64Array(2 * blockSamples);
  const bytes = new Uint8Array(blockSamples * writer.bytesPerSample);
  try {
    const handle = await open(part, 'w');
    try {
      for (let at = 0; at < samples; at += blockSamples) {
        const count = Math.min(blockSamples, samples - at);
        capture.read(count, block);
        await handle.write(bytes, 0, writer.write(block, count, bytes));
        if (signal.aborted) break;
      }
      await handle.sync();
    } finally {
      await handle.close();
    }
    if (signal.aborted) {
      await rm(part, { force: true });
      return refused('cancelled', 'Cancelled. Nothing was kept.');
    }
    await rename(part, command.out);
    const meta = await writeMeta(command, capture.clockHz);
    const { saturated } = writer;
    return done(
      [
        `${command.out}: ${counted(samples)} at ${Number(capture.clockHz.toPrecision(15))} Hz, seed ${command.impairments.seed}`,
        `  saturated: ${counted(saturated.samples)}`,
        ...(samples < asked ? [`  cut: the whole would be ${counted(asked)} (--samples)`] : []),
        ...(meta === null ? [] : [`  ${meta}`]),
      ],
      {
        file: command.out,
        meta,
        samples,
        asked,
        clockHz: capture.clockHz,
        saturated,
        impairments: command.impairments,
      },
    );
  } catch (error) {
    await rm(part, { force: true });
    return refused('io_failed', `${command.out}: ${reasonOf(error)}.`);
  }
}

const counted = (samples: number): string => `${samples} ${samples === 1 ? 'sample' : 'samples'}`;

/** The vector's samples, full scale 1. Text is indexed first. */
async function vectorSource(pack: OpenPack): Promise<SampleSource> {
  const opening = captureReadings(pack.vector.sources, pack.vector.layout);
  for (;;) {
    const next = opening.next();
    if (next.done !== true) continue;
    if (!next.value.ok) throw new Error(next.value.message);
    return next.value.readings[0]!.source;
  }
}

/** Mean power of the active part, full scale 1, as the manifest says. */
function activePower(pack: OpenPack): number {
  const { activeRmsDbfs } = pack.manifest.levels;
  return activeRmsDbfs === null ? 0 : 10 ** (activeRmsDbfs / 10);
}

/** SigMF metadata beside a .sigmf-data file whose words SigMF has a type for; null else, and what stood there of an earlier file goes. */
async function writeMeta({ out, layout }: ImpairCommand, clockHz: number): Promise<string | null> {
  if (!out.endsWith('.sigmf-data')) return null;
  const file = out.replace(/\.sigmf-data$/, '.sigmf-meta');
  if (layout.swapIq || layout.negateQ || (layout.word === 'int16' && layout.bits < 16)) {
    await rm(file, { force: true });
    return null;
  }
  const isOffset = layout.numberFormat === 'offsetBinary';
  const order = layout.byteOrder === 'little' ? 'le' : 'be';
  const type =
    layout.word === 'float32'
      ? `cf32_${order}`
      : layout.word === 'int8'
        ? isOffset
          ? 'cu8'
          : 'ci8'
        : `${isOffset ? 'cu16' : 'ci16'}_${order}`;
  const meta = {
    global: {
      'core:datatype': type,
      'core:version': '1.0.0',
      'core:sample_rate': clockHz,
      'core:description': 'Made by combwright impair from a vector: no recording of a device.',
    },
    captures: [{ 'core:sample_start': 0 }],
    annotations: [],
  };
  await writeFile(file, `${JSON.stringify(meta, null, 2)}\n`);
  return path.basename(file);
}
