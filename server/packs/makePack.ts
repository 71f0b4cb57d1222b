import { createHash } from 'node:crypto';
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
import {
  saturatedWordsOf,
  sideEntries,
  stateWordsOf,
  vectorEntriesOf,
  vectorNameOf,
  type EntryInput,
  type SideEntry,
} from './entries.ts';
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
import { writeVector } from './vectorWriter.ts';
import { createZipFile, type ZipFile, type ZipRoom } from './zipFile.ts';

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
      vectorSha256: proof.sha256,
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

/** Rooms for the vector's files at the beginning of the zip: their names' lengths are known before their digests are. */
function reserveVector(zip: ZipFile, { document, profile, state }: PackRequest): ZipRoom[] {
  const baseName = baseNameFor(document, profile, state, '0'.repeat(64));
  return vectorFiles(document.content, profile.content).map(({ ending, bytes }) =>
    zip.reserve(vectorNameOf(baseName, ending, profile).length, bytes),
  );
}

async function make(request: PackRequest, zip: ZipFile, pool: WorkPool): Promise<Omit<MadePack, 'file' | 'fileName'>> {
  const { document, profile, state, signal, onProgress } = request;
  const { content } = document;
  const bench = profile.content;
  const step = (name: PackStep) => ({ signal, onProgress: stepProgress(onProgress, name) });
  const check = () => throwIfCancelled(signal);

  const measure = await measureRendering(pool, content, step('rendering'));
  const scale = scaleOf(document, profile, measure);
  const rooms = reserveVector(zip, request);
  refuseSaturation(document, await writeVector(pool, content, bench, scale, rooms, step('quantizing')));
  const proof = await proveVector(pool, content, bench, scale, rooms, step('readingBack'));
  requireProof(proof, measure.stats.samples);

  const { onProgress: writing } = step('writing');
  const reduction = await measureReduction(content, signal);
  const pack = describePack({ document, profile, state, scale, measure, proof, reduction });
  for (const [i, { name }] of pack.vectors.entries()) await zip.settle(rooms[i]!, name, proof.files[i]!.crc32);
  // The zip's own digest is begun while the other entries are made.
  const { fd } = zip.handle;
  const settledBytes = zip.bytes;
  const place = (from: number, end: number) => ({ fd, offsetBytes: from, bytes: end - from });
  const begun = digestPlace(pool, 'zip', 'sha256', place(0, settledBytes), check, false);
  begun.catch(() => undefined); // waited for below, unless something fails before
  const files: Manifest['files'] = [...pack.vectors];
  const add = async (entry: SideEntry) => {
    const tally = createTally();
    await zip.append(entry.name, tally.through(entry.chunks()), {
      isLarge: isLargeEntry(entry, document, profile),
      signal,
    });
    files.push({ name: entry.name, role: entry.role, ...tally.result() });
  };
  try {
    for (const entry of pack.before) await add(entry);
    // The manifest lists what stands behind it, which is small: texts and the two inputs.
    const behind = pack.after.map((entry) => {
      const tally = createTally();
      const chunks = [...tally.through(entry.chunks())];
      files.push({ name: entry.name, role: entry.role, ...tally.result() });
      return { name: entry.name, chunks };
    });
    const manifest = pack.manifestOf(files);
    const manifestText = manifestTextOf(manifest);
    await zip.append('manifest.json', [Buffer.from(manifestText, 'utf8')], { signal });
    for (const { name, chunks } of behind) await zip.append(name, chunks, { signal });
    const fileBytes = await zip.finish();
    writing(0.5);
    await begun;
    writing(0.9);
    const fileSha256 = await digestPlace(pool, 'zip', 'sha256', place(settledBytes, fileBytes), check);
    return {
      fileBytes,
      fileSha256,
      baseName: pack.baseName,
      vectorName: pack.vectors[0]!.name,
      vectorSha256: proof.sha256,
      manifest,
      manifestText,
      notices: pack.notices,
    };
  } finally {
    await begun.catch(() => undefined); // it reads the file, which is closed next
  }
}

/** Markers, references: what may grow with the repeats, beside the vector. */
function isLargeEntry({ role }: SideEntry, document: WaveformDocument, profile: BenchProfile): boolean {
  const canGrow = role === 'markers' || role === 'reference' || role === 'referenceSent';
  return canGrow && packBytesOf(document.content, profile.content) >= 2 ** 32 - 1;
}

/**
 * Renders, writes, reads back, proves and zips. The vector is written where it stands in the zip, and read back there. Either a whole pack
 * stands under its name afterwards, or nothing does and the answer says why: temporaries lie in a folder of their own, which goes in both
 * cases.
 */
export async function makePack(request: PackRequest): Promise<PackResult> {
  const { document, profile, signal } = request;
  let folder: string | null = null;
  let pool: WorkPool | null = null;
  let zip: ZipFile | null = null;
  try {
    const refusal = refusalOf(document, profile);
    if (refusal) throw refusal;
    throwIfCancelled(signal);
    folder = await makeWorkFolder(request.tmpFolder);
    const zipFile = path.join(folder, 'pack.zip');
    pool = openPool(document.content, profile.content, request.threads);
    signal?.addEventListener('abort', () => void pool?.close(), { once: true }); // no need to wait for what is under way
    zip = await createZipFile(zipFile);
    const made = await make(request, zip, pool);
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
    await zip?.close();
    if (folder !== null) await removeWorkFolder(folder);
  }
}
