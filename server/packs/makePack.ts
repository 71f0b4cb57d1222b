import { createHash } from 'node:crypto';
import { open } from 'node:fs/promises';
import path from 'node:path';
import { baseName as baseNameOf } from '@/lib/document/packNames';
import type { Manifest } from '@/lib/document/manifestSchema';
import {
  cautions,
  createCellValues,
  frameLayout,
  levelCard,
  vectorFiles,
  wordScale,
  symbolPeaksOf,
  type BenchProfile,
  type WaveformDocument,
  type WordScale,
} from '@/lib/synth';
import type { PayloadCount } from './entryChunks.ts';
import { saturatedWordsOf, sideEntries, stateWordsOf, vectorEntriesOf, type EntryInput } from './entries.ts';
import { packBytesOf } from './estimate.ts';
import { digestPlace } from './fileDigest.ts';
import { levelCardText } from './levelCardText.ts';
import { makeManifest } from './manifest/manifest.ts';
import { measureReduction, type MeasuredReduction } from './measureReduction.ts';
import { measureRendering, type RenderingMeasure } from './measureRendering.ts';
import { PackError, throwIfCancelled, toPackError } from './packError.ts';
import { packLevels } from './packLevels.ts';
import type { MadePack, PackProgress, PackRequest, PackResult, PackState, PackStep } from './packTypes.ts';
import { openPool, type WorkPool } from './pool/workPool.ts';
import { noticesOf, refusalOf } from './refusals.ts';
import { makeWorkFolder, publishFile, removeWorkFolder } from './tmpFiles.ts';
import { proveVector, type VectorProof } from './vectorProof.ts';
import type { VectorPlace } from './vectorPlaces.ts';
import { writeVector } from './vectorWriter.ts';
import { writeZip, type ZipSource } from './zipWriter.ts';

/** Where each step ends on the bar of the whole job. */
const stepEnds: Record<PackStep, [from: number, to: number]> = {
  rendering: [0, 0.3],
  quantizing: [0.3, 0.5],
  readingBack: [0.5, 0.85],
  writing: [0.85, 1],
};

/** Of the last step: the zip's bytes; the rest is its digest. */
const writtenShare = 0.8;

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

const baseNameFor = (
  document: WaveformDocument,
  profile: BenchProfile,
  state: PackState,
  vectorSha256: string,
): string =>
  baseNameOf({
    title: document.about.title,
    edition: state === 'draft' ? null : state,
    vectorSha256,
    most: profile.content.fileName.most,
  });

/** Card, names and entries that follow from a proven vector; the same for making a pack and for verifying one. */
export function describePack(given: {
  document: WaveformDocument;
  profile: BenchProfile;
  state: PackState;
  scale: WordScale;
  measure: RenderingMeasure;
  proof: VectorProof;
  reduction: MeasuredReduction | null;
}) {
  const { document, profile, state, scale, measure, proof, reduction } = given;
  const levels = packLevels(measure, scale, proof);
  const baseName = baseNameFor(document, profile, state, proof.sha256);
  const card = levelCard(document, profile, levels);
  const points = cautions(card, {
    state: state === 'draft' ? 'draft' : 'released',
    edition: state === 'draft' ? null : state,
    digest: proof.sha256,
    fetched: null,
  });
  const stateWords = stateWordsOf(state, document, profile);
  const notices = noticesOf(document, profile, levels, symbolPeaksOf(measure.frame.symbolPeakPower));
  const payloads = new Map<number, PayloadCount>();
  const layout = frameLayout(document.content);
  const values = createCellValues(document.content);
  const cardText = levelCardText(
    {
      baseName,
      stateWords,
      title: document.about.title,
      benchName: profile.about.name,
      vectorSha256:
        proof.files.length === 1 ? proof.sha256 : `${proof.sha256} (the -i file with the -q file behind it)`,
      saturatedWords: saturatedWordsOf(proof),
      notices,
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
    reduction,
  };
  const { before, after } = sideEntries(input);
  const safety = [...(state === 'draft' ? [stateWords] : []), ...points.map(({ text }) => text), ...notices];
  return {
    baseName,
    vectors: vectorEntriesOf(baseName, profile, proof),
    before,
    after,
    levels,
    notices,
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
        reduction,
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

/** One of the vector's files, under a name of the work folder until its digest gives it its own. */
interface VectorFile {
  path: string;
  place: VectorPlace;
}

async function openVector({ document, profile }: PackRequest, folder: string, opened: VectorFile[]): Promise<void> {
  for (const [i, { bytes }] of vectorFiles(document.content, profile.content).entries()) {
    const file = path.join(folder, `vector-${i}`);
    opened.push({ path: file, place: { handle: await open(file, 'wx+'), offsetBytes: 0, bytes } });
  }
}

/** What stands in the files, whatever should. */
const finishedPlaces = (vector: readonly VectorFile[]): Promise<VectorPlace[]> =>
  Promise.all(vector.map(async ({ place }) => ({ ...place, bytes: (await place.handle.stat()).size })));

async function make(
  request: PackRequest,
  { vector, zipFile, pool }: { vector: readonly VectorFile[]; zipFile: string; pool: WorkPool },
): Promise<Omit<MadePack, 'file' | 'fileName'>> {
  const { document, profile, state, signal, onProgress } = request;
  const { content } = document;
  const bench = profile.content;
  const step = (name: PackStep) => ({ signal, onProgress: stepProgress(onProgress, name) });

  const measure = await measureRendering(pool, content, step('rendering'));
  const scale = scaleOf(document, profile, measure);
  const places = vector.map(({ place }) => place);
  refuseSaturation(document, await writeVector(pool, content, bench, scale, places, step('quantizing')));
  const proof = await proveVector(pool, content, bench, scale, await finishedPlaces(vector), step('readingBack'));
  requireProof(proof, measure.stats.samples);

  const { onProgress: writing } = step('writing');
  const reduction = await measureReduction(content, signal);
  const pack = describePack({ document, profile, state, scale, measure, proof, reduction });
  const files: Manifest['files'] = [...pack.vectors];
  let manifest: Manifest | null = null;
  let manifestText = '';
  const most = packBytesOf(content, bench);
  let bytes = 0;
  await writeZip(zipFile, entriesOf(), {
    signal,
    onBytes: (count) => writing((writtenShare * (bytes += count)) / most),
  });

  /** One after another: the manifest lists what stands before it, and the texts and the two inputs behind it. */
  function* entriesOf(): Generator<ZipSource> {
    for (const [i, { name }] of pack.vectors.entries()) yield { name, from: vector[i]!.path };
    for (const { name, role, chunks } of pack.before) {
      const tally = createTally();
      yield { name, from: () => tally.through(chunks()) };
      files.push({ name, role, ...tally.result() });
    }
    const behind = pack.after.map(({ name, role, chunks }) => {
      const tally = createTally();
      const made = [...tally.through(chunks())];
      files.push({ name, role, ...tally.result() });
      return { name, from: () => made };
    });
    manifest = pack.manifestOf(files);
    manifestText = manifestTextOf(manifest);
    yield { name: 'manifest.json', from: () => [Buffer.from(manifestText, 'utf8')] };
    yield* behind;
  }

  const zip = await open(zipFile, 'r');
  try {
    const { size } = await zip.stat();
    const place = { fd: zip.fd, offsetBytes: 0, bytes: size };
    const fileSha256 = await digestPlace(pool, 'zip', 'sha256', place, () => throwIfCancelled(signal));
    return {
      fileBytes: size,
      fileSha256,
      baseName: pack.baseName,
      vectorName: pack.vectors[0]!.name,
      vectorSha256: proof.sha256,
      manifest: manifest!,
      manifestText,
      notices: pack.notices,
    };
  } finally {
    await zip.close();
  }
}

/**
 * Renders, writes, reads back, proves and zips. Either a whole pack stands under its name afterwards, or nothing does and the answer says
 * why: temporaries lie in a folder of their own, which goes in both cases.
 */
export async function makePack(request: PackRequest): Promise<PackResult> {
  const { document, profile, signal } = request;
  let folder: string | null = null;
  let pool: WorkPool | null = null;
  const vector: VectorFile[] = [];
  try {
    const refusal = refusalOf(document, profile);
    if (refusal) throw refusal;
    throwIfCancelled(signal);
    folder = await makeWorkFolder(request.tmpFolder);
    const zipFile = path.join(folder, 'pack.zip');
    pool = openPool(document.content, profile.content, request.threads);
    signal?.addEventListener('abort', () => void pool?.close(), { once: true }); // no need to wait for what is under way
    await openVector(request, folder, vector);
    const made = await make(request, { vector, zipFile, pool });
    const fileName = `${made.baseName}.zip`;
    const file = request.outFile(fileName);
    throwIfCancelled(signal);
    await publishFile(zipFile, file);
    request.onProgress?.({ step: 'writing', doneRatio: 1 });
    return { ok: true, pack: { ...made, file, fileName } };
  } catch (error) {
    const { code, message, issues } = toPackError(error, signal);
    return { ok: false, code, message, issues };
  } finally {
    await pool?.close();
    for (const { place } of vector) await place.handle.close();
    if (folder !== null) await removeWorkFolder(folder);
  }
}
