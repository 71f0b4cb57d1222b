import { access, mkdir } from 'node:fs/promises';
import path from 'node:path';
import type { BenchProfile, WaveformDocument } from '@/lib/synth';
import { makePack } from '../packs/makePack.ts';
import type { WorkThreads } from '../packs/pool/workPool.ts';
import type { PackProgress } from '../packs/packTypes.ts';
import { sweepWorkFolders } from '../packs/tmpFiles.ts';
import { done, refused, type Outcome } from './outcome.ts';
import { readDocument, readProfile, reasonOf } from './readInputs.ts';

export interface RenderCommand {
  document: string;
  bench: string;
  out: string | null;
  json: boolean;
}

const stepWords = { rendering: 'Rendering', quantizing: 'Quantizing', readingBack: 'Reading back', writing: 'Writing' };

/** A line that rewrites itself, for a person at a terminal only; scripts get no progress. */
function progressLine(): { show: (progress: PackProgress) => void; clear: () => void } {
  if (!process.stderr.isTTY) return { show: () => undefined, clear: () => undefined };
  return {
    show: ({ step, doneRatio }) => process.stderr.write(`\r\x1b[K${stepWords[step]} ${Math.floor(100 * doneRatio)} %`),
    clear: () => process.stderr.write('\r\x1b[K'),
  };
}

/** Where a pack goes and what it may not overwrite. */
export interface PackTarget {
  out: string | null;
  inputs: string[];
  signal: AbortSignal;
  threads: WorkThreads;
}

/** render document.json bench.json [--out pack.zip]: a draft's pack, proven, or nothing at all. */
export async function render(
  command: RenderCommand,
  { signal, threads }: { signal: AbortSignal; threads: WorkThreads },
): Promise<Outcome> {
  const document = await readDocument(command.document);
  if (!document.ok) return document.outcome;
  const profile = await readProfile(command.bench);
  if (!profile.ok) return profile.outcome;
  const inputs = [command.document, command.bench];
  return packDocument(document.value, profile.value, { out: command.out, inputs, signal, threads });
}

/** The pack of a document, as a draft; `more` are lines that stand behind what was made. */
export async function packDocument(
  document: WaveformDocument,
  profile: BenchProfile,
  { out, inputs, signal, threads }: PackTarget,
  more: string[] = [],
): Promise<Outcome> {
  const folder = path.resolve(out === null ? '.' : path.dirname(out));
  try {
    await mkdir(folder, { recursive: true });
    await access(folder);
  } catch (error) {
    return refused('io_failed', `${folder}: ${reasonOf(error)}.`);
  }
  if (out !== null && inputs.some((input) => path.resolve(input) === path.resolve(out)))
    return refused('invalid', `${out} is one of the inputs; nothing was written.`);
  await sweepWorkFolders(folder);
  const progress = progressLine();
  const result = await makePack({
    document,
    profile,
    state: 'draft',
    tmpFolder: folder,
    outFile: (fileName) => (out === null ? path.join(folder, fileName) : path.resolve(out)),
    onProgress: progress.show,
    signal,
    threads,
  });
  progress.clear();
  if (!result.ok) return refused(result.code, result.message, result.issues);
  const { pack } = result;
  const { manifest } = pack;
  const { proof } = manifest;
  const file = out ?? pack.fileName;
  return done(
    [
      `${file}: ${pack.fileBytes} bytes, a draft`,
      ...manifest.files.filter(({ role }) => role.startsWith('vector')).map(({ name }) => `vector ${name}`),
      `  ${manifest.samples.fileSamples} samples at ${manifest.clock.sampleClockHz} Hz, SHA-256 ${pack.vectorSha256}`,
      `  read back: ${proof.wordsCompared} words equal, EVM ${proof.evmDb === null ? 'none' : `${proof.evmDb.toFixed(2)} dB`} over ${proof.cells} cells`,
      ...pack.notices.map((notice) => `  ${notice}`),
      ...more,
    ],
    {
      file,
      bytes: pack.fileBytes,
      sha256: pack.fileSha256,
      baseName: pack.baseName,
      packKey: manifest.packKey,
      vector: { name: pack.vectorName, sha256: pack.vectorSha256, samples: manifest.samples.fileSamples },
      proof,
      notices: pack.notices,
    },
  );
}
