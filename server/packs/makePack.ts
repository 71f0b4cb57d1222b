import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { open, stat, type FileHandle } from 'node:fs/promises';
import path from 'node:path';
import { baseName as baseNameOf } from '@/lib/document/packNames';
import type { Manifest } from '@/lib/document/manifestSchema';
import {
  cautions,
  createCellValues,
  frameLayout,
  levelCard,
  wordScale,
  type BenchProfile,
  type WaveformDocument,
  type WordScale,
} from '@/lib/synth';
import type { PayloadCount } from './entryChunks.ts';
import {
  saturatedWordsOf,
  sideEntries,
  stateWordsOf,
  vectorEntriesOf,
  type EntryInput,
  type SideEntry,
} from './entries.ts';
import { levelCardText } from './levelCardText.ts';
import { makeManifest } from './manifest/manifest.ts';
import { measureRendering, type RenderingMeasure } from './measureRendering.ts';
import { PackError, throwIfCancelled, toPackError } from './packError.ts';
import { packLevels } from './packLevels.ts';
import type { MadePack, PackProgress, PackRequest, PackResult, PackState, PackStep } from './packTypes.ts';
import { noticesOf, refusalOf } from './refusals.ts';
import { makeWorkFolder, publishFile, removeWorkFolder } from './tmpFiles.ts';
import { proveVector, type VectorProof } from './vectorProof.ts';
import { writeChunks, writeVector } from './vectorWriter.ts';
import { writeZip, type ZipSource } from './zipWriter.ts';

/** Where each step ends on the bar of the whole job. */
const stepEnds: Record<PackStep, [from: number, to: number]> = {
  rendering: [0, 0.3],
  quantizing: [0.3, 0.5],
  readingBack: [0.5, 0.85],
  writing: [0.85, 1],
};

function stepProgress(report: ((progress: PackProgress) => void) | undefined, step: PackStep) {
  const [from, to] = stepEnds[step];
  report?.({ step, doneRatio: from });
  return (ratio: number) => report?.({ step, doneRatio: from + (to - from) * Math.min(1, ratio) });
}

/** Refuses what has nothing to scale, and gives the scale else. */
export function scaleOf(document: WaveformDocument, profile: BenchProfile, measure: RenderingMeasure): WordScale {
  const scale = wordScale(document.content.level, measure.levels, profile.content);
  if (!scale.isSilent) return scale;
  throw new PackError('invalid', 'Nothing is painted: every sample is zero.', [
    { where: 'document', pointer: '/content/grid', message: 'no cell sends anything' },
  ]);
}

/** Saturation is meant only where the document's level refers to the RMS; everywhere else it refuses the pack. */
export function refuseSaturation(document: WaveformDocument, saturated: { components: number; samples: number }): void {
  if (saturated.components === 0 || document.content.level.reference === 'rms') return;
  throw new PackError('limit_missed', `${saturated.samples} samples would saturate.`, [
    {
      where: 'document',
      pointer: '/content/level',
      message: `${saturated.components} components pass full scale: more headroom is needed`,
    },
  ]);
}

/** What decides whether a pack may be offered: every word equal, the reader's sample count, a finite EVM. */
export function requireProof(proof: VectorProof, samples: number): void {
  const failed = (message: string) => new PackError('proof_failed', `Not offered: ${message}.`);
  if (proof.headsDiffer > 0) throw failed(`${proof.headsDiffer} of its files begin with another head`);
  if (proof.samplesRead !== samples) throw failed(`the file has ${proof.samplesRead} samples instead of ${samples}`);
  if (proof.wordsDifferent > 0)
    throw failed(`${proof.wordsDifferent} of ${proof.wordsCompared} words differ from a second rendering`);
  if (proof.evm.all.ratio === null || !Number.isFinite(proof.evm.all.ratio))
    throw failed('what was read back does not look like what was painted');
}

/** Card, names and entries that follow from a proven vector; the same for making a pack and for verifying one. */
export function describePack(given: {
  document: WaveformDocument;
  profile: BenchProfile;
  state: PackState;
  scale: WordScale;
  measure: RenderingMeasure;
  proof: VectorProof;
}) {
  const { document, profile, state, scale, measure, proof } = given;
  const levels = packLevels(measure, scale, proof);
  const baseName = baseNameOf({
    title: document.about.title,
    edition: state === 'draft' ? null : state,
    vectorSha256: proof.sha256,
    most: profile.content.fileName.most,
  });
  const card = levelCard(document, profile, levels);
  const points = cautions(card, {
    state: state === 'draft' ? 'draft' : 'released',
    edition: state === 'draft' ? null : state,
    digest: proof.sha256,
    fetched: null,
  });
  const payloads = new Map<number, PayloadCount>();
  const layout = frameLayout(document.content);
  const values = createCellValues(document.content);
  const cardText = levelCardText(
    {
      baseName,
      stateWords: stateWordsOf(state),
      title: document.about.title,
      benchName: profile.about.name,
      vectorSha256: proof.sha256,
      saturatedWords: saturatedWordsOf(proof),
    },
    card,
    points,
  );
  const input: EntryInput = {
    document,
    profile,
    state,
    baseName,
    layout,
    values,
    scale,
    proof,
    payloads,
    cardText,
  };
  const { before, after } = sideEntries(input);
  const safety = [...(state === 'draft' ? [stateWordsOf(state)] : []), ...points.map(({ text }) => text)];
  return {
    baseName,
    vectors: vectorEntriesOf(baseName, profile, proof),
    before,
    after,
    levels,
    /** `files` in the order of the entries, the manifest left out. */
    manifestOf: (files: Manifest['files']): Manifest =>
      makeManifest({
        document,
        profile,
        state,
        layout,
        values,
        scale,
        measure,
        proof,
        levels,
        payloads,
        files,
        safety,
      }),
  };
}

/** One space an indent: a map of 4096 points would else be mostly spaces. */
export const manifestTextOf = (manifest: Manifest): string => `${JSON.stringify(manifest, null, 1)}\n`;

/** Digest and size of chunks on their way to wherever they go. */
export function createTally() {
  const hash = createHash('sha256');
  let bytes = 0;
  return {
    *through(chunks: Iterable<Uint8Array>): Generator<Uint8Array> {
      for (const chunk of chunks) {
        hash.update(chunk);
        bytes += chunk.length;
        yield chunk;
      }
    },
    result: () => ({ bytes, sha256: hash.digest('hex') }),
  };
}

async function sha256Of(file: string, signal: AbortSignal | undefined): Promise<string> {
  const hash = createHash('sha256');
  for await (const chunk of createReadStream(file, { highWaterMark: 1 << 20 })) {
    throwIfCancelled(signal);
    hash.update(chunk as Buffer);
  }
  return hash.digest('hex');
}

async function make(request: PackRequest, folder: string): Promise<MadePack> {
  const { document, profile, state, signal, onProgress } = request;
  const { content } = document;
  const bench = profile.content;

  const measure = await measureRendering(content, { signal, onProgress: stepProgress(onProgress, 'rendering') });
  const scale = scaleOf(document, profile, measure);

  const { saturated, written: vectorFiles } = await writeVector(folder, content, bench, scale, {
    signal,
    onProgress: stepProgress(onProgress, 'quantizing'),
  });
  refuseSaturation(document, saturated);

  const handles: FileHandle[] = [];
  let proof: VectorProof;
  try {
    for (const { file } of vectorFiles) handles.push(await open(file, 'r'));
    const places = await Promise.all(
      handles.map(async (handle) => ({ handle, offsetBytes: 0, bytes: (await handle.stat()).size })),
    );
    const progress = stepProgress(onProgress, 'readingBack');
    proof = await proveVector(content, bench, scale, places, { signal, onProgress: progress });
  } finally {
    for (const handle of handles) await handle.close();
  }
  requireProof(proof, measure.stats.samples);

  const writing = stepProgress(onProgress, 'writing');
  const pack = describePack({ document, profile, state, scale, measure, proof });
  const files: Manifest['files'] = [...pack.vectors];
  const sources: ZipSource[] = pack.vectors.map(({ name }, i) => ({ name, from: vectorFiles[i]!.file }));
  const add = async (entry: SideEntry) => {
    const file = path.join(folder, `entry-${sources.length}`);
    const tally = createTally();
    await writeChunks(file, tally.through(entry.chunks()), signal);
    files.push({ name: entry.name, role: entry.role, ...tally.result() });
    sources.push({ name: entry.name, from: file });
  };
  for (const entry of pack.before) await add(entry);
  const manifestPlace = sources.length;
  for (const entry of pack.after) await add(entry);
  const manifest = pack.manifestOf(files);
  const manifestText = manifestTextOf(manifest);
  sources.splice(manifestPlace, 0, { name: 'manifest.json', from: Buffer.from(manifestText, 'utf8') });

  const total = files.reduce((sum, file) => sum + file.bytes, manifestText.length);
  let written = 0;
  const zipFile = path.join(folder, 'pack.zip');
  await writeZip(zipFile, sources, {
    ...(signal ? { signal } : {}),
    onBytes: (bytes) => writing((0.9 * (written += bytes)) / total),
  });
  const fileSha256 = await sha256Of(zipFile, signal);
  const fileName = `${pack.baseName}.zip`;
  const file = request.outFile(fileName);
  throwIfCancelled(signal);
  await publishFile(zipFile, file);
  writing(1);
  return {
    file,
    fileName,
    fileBytes: (await stat(file)).size,
    fileSha256,
    baseName: pack.baseName,
    vectorName: pack.vectors[0]!.name,
    vectorSha256: proof.sha256,
    manifest,
    manifestText,
    notices: noticesOf(document, profile, pack.levels),
  };
}

/**
 * Renders, writes, reads back, proves and zips. Either a whole pack stands under its name afterwards, or nothing does and the answer says
 * why: temporaries lie in a folder of their own, which goes in both cases.
 */
export async function makePack(request: PackRequest): Promise<PackResult> {
  let folder: string | null = null;
  try {
    const refusal = refusalOf(request.document, request.profile);
    if (refusal) throw refusal;
    throwIfCancelled(request.signal);
    folder = await makeWorkFolder(request.tmpFolder);
    return { ok: true, pack: await make(request, folder) };
  } catch (error) {
    const { code, message, issues } = toPackError(error);
    return { ok: false, code, message, issues };
  } finally {
    if (folder !== null) await removeWorkFolder(folder);
  }
}
