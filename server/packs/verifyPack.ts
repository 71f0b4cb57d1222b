import { createHash } from 'node:crypto';
import { open, type FileHandle } from 'node:fs/promises';
import { crc32 } from 'node:zlib';
import { contentDigest, documentDigest, intentDigest, profileDigest, profileFileDigest } from '@/lib/document/digest';
import type { Manifest } from '@/lib/document/manifestSchema';
import { parseBenchProfile, parseManifest, parseWaveformDocument } from '@/lib/document/parse';
import type { ParseResult } from '@/lib/document/issues';
import { synthVersion, vectorFiles, type BenchProfile, type WaveformDocument, type WordScale } from '@/lib/synth';
import { createTally, describePack, manifestTextOf, scaleOf } from './makePack.ts';
import { packKeyOf } from './manifest/manifest.ts';
import { measureReduction } from './measureReduction.ts';
import { measureRendering, type RenderingMeasure } from './measureRendering.ts';
import { PackError, throwIfCancelled, toPackError, type PackErrorCode, type PackIssue } from './packError.ts';
import type { PackState } from './packTypes.ts';
import { openPool, type WorkThreads } from './pool/workPool.ts';
import { packVersion } from './packVersion.ts';
import { proveVector, type VectorProof } from './vectorProof.ts';
import { readSmallEntry, readZipEntries, type ZipEntry } from './zipReader.ts';

export interface VerifiedPack {
  manifest: Manifest;
  entries: number;
  wordsCompared: number;
  evmDb: number | null;
  /** False where the pack was made by another version: its digests and words were checked, its texts were not made again. */
  madeAgain: boolean;
}

export type VerifyResult =
  { ok: true; verified: VerifiedPack } | { ok: false; code: PackErrorCode; message: string; issues: PackIssue[] };

const mostDocumentBytes = 32 * 1024 * 1024;
const mostManifestBytes = 256 * 1024 * 1024;

/** Collects what is wrong, so that a person sees all of it at once. */
class Findings {
  readonly issues: PackIssue[] = [];
  add(name: string, message: string): void {
    this.issues.push({ where: 'pack', pointer: `/${name}`, message });
  }
  end(): void {
    if (this.issues.length === 0) return;
    throw new PackError('proof_failed', 'Not the same: do not use this pack.', this.issues);
  }
}

const damaged = (message: string) => new PackError('invalid', `This is not a whole pack: ${message}.`);

async function readParsed<T>(
  handle: FileHandle,
  entries: ZipEntry[],
  name: string,
  mostBytes: number,
  parse: (bytes: Uint8Array) => ParseResult<T>,
): Promise<T> {
  const entry = entries.find((one) => one.name === name);
  if (!entry) throw damaged(`${name} is missing`);
  const parsed = parse(await readSmallEntry(handle, entry, mostBytes));
  if (parsed.ok) return parsed.value;
  const issues = parsed.issues.map(({ pointer, message }) => ({
    where: 'pack' as const,
    pointer: `/${name}${pointer}`,
    message,
  }));
  throw new PackError('invalid', `This is not a whole pack: ${name} is not valid.`, issues);
}

async function digestEntry(handle: FileHandle, entry: ZipEntry, signal?: AbortSignal) {
  const hash = createHash('sha256');
  let sum = 0;
  const buffer = Buffer.alloc(1 << 20);
  for (let done = 0; done < entry.bytes;) {
    throwIfCancelled(signal);
    const want = Math.min(buffer.length, entry.bytes - done);
    const { bytesRead } = await handle.read(buffer, 0, want, entry.offsetBytes + done);
    if (bytesRead === 0) throw damaged(`${entry.name} ends early`);
    const part = buffer.subarray(0, bytesRead);
    hash.update(part);
    sum = crc32(part, sum);
    done += bytesRead;
  }
  return { sha256: hash.digest('hex'), crc: sum };
}

/** The zip's entries against manifest.files and the zip's own sums. */
async function checkEntries(
  handle: FileHandle,
  entries: ZipEntry[],
  manifest: Manifest,
  findings: Findings,
  signal?: AbortSignal,
): Promise<void> {
  const listed = new Map(manifest.files.map((file) => [file.name, file]));
  for (const entry of entries) {
    const { sha256, crc } = await digestEntry(handle, entry, signal);
    if (crc !== entry.crc32) findings.add(entry.name, "differs from the zip's own sum");
    if (entry.name === 'manifest.json') continue;
    const file = listed.get(entry.name);
    listed.delete(entry.name);
    if (!file) findings.add(entry.name, 'is not in the manifest');
    else if (file.bytes !== entry.bytes) findings.add(entry.name, `has ${entry.bytes} bytes instead of ${file.bytes}`);
    else if (file.sha256 !== sha256) findings.add(entry.name, 'has another SHA-256 than the manifest says');
  }
  for (const name of listed.keys()) findings.add(name, 'is missing');
}

function checkDigests(
  manifest: Manifest,
  document: WaveformDocument,
  profile: BenchProfile,
  state: PackState,
  findings: Findings,
): boolean {
  const { digests } = manifest;
  const pairs: [found: string, said: string, name: string][] = [
    [contentDigest(document.content), digests.contentDigest, 'contentDigest'],
    [intentDigest(document.intent), digests.intentDigest, 'intentDigest'],
    [documentDigest(document), digests.documentDigest, 'documentDigest'],
    [profileDigest(profile.content), digests.profileDigest, 'profileDigest'],
    [profileFileDigest(profile), digests.profileFileDigest, 'profileFileDigest'],
  ];
  for (const [found, said, name] of pairs)
    if (found !== said) findings.add(`manifest.json/digests/${name}`, `is ${said}, the pack's own files give ${found}`);
  const sameVersions = digests.synthVersion === String(synthVersion) && digests.packVersion === packVersion;
  if (sameVersions && packKeyOf(document, profile, state) !== manifest.packKey)
    findings.add('manifest.json/packKey', 'does not follow from what the pack was made from');
  return sameVersions;
}

async function verify(handle: FileHandle, { signal, threads }: VerifyOptions): Promise<VerifiedPack> {
  const entries = await readZipEntries(handle);
  const manifest = await readParsed(handle, entries, 'manifest.json', mostManifestBytes, parseManifest);
  const document = await readParsed(
    handle,
    entries,
    'document.combwright.json',
    mostDocumentBytes,
    parseWaveformDocument,
  );
  const profile = await readParsed(handle, entries, 'bench.json', mostDocumentBytes, parseBenchProfile);
  const state: PackState = manifest.edition ?? 'draft';
  const findings = new Findings();
  if ((manifest.edition === null) !== (manifest.state === 'draft'))
    findings.add('manifest.json/state', 'does not agree with the edition');
  await checkEntries(handle, entries, manifest, findings, signal);
  const madeAgain = checkDigests(manifest, document, profile, state, findings);
  const vectors = vectorFiles(document.content, profile.content).map(({ role }) => {
    const listed = manifest.files.find((file) => file.role === role);
    const entry = entries.find((one) => one.name === listed?.name);
    if (!entry) throw damaged('its vector is missing');
    return entry;
  });

  const pool = openPool(document.content, profile.content, threads);
  signal?.addEventListener('abort', () => void pool.close(), { once: true });
  let measure: RenderingMeasure;
  let scale: WordScale;
  let proof: VectorProof;
  try {
    measure = await measureRendering(pool, document.content, { signal });
    scale = scaleOf(document, profile, measure);
    const places = vectors.map(({ offsetBytes, bytes }) => ({ handle, offsetBytes, bytes }));
    proof = await proveVector(pool, document.content, profile.content, scale, places, { signal });
  } finally {
    await pool.close();
  }
  const { name } = vectors[0]!;
  if (proof.headsDiffer > 0) findings.add(name, `begins otherwise than a file of ${measure.stats.samples} samples`);
  if (proof.samplesRead !== measure.stats.samples)
    findings.add(name, `has ${proof.samplesRead} samples instead of ${measure.stats.samples}`);
  if (proof.wordsDifferent > 0)
    findings.add(name, `${proof.wordsDifferent} of ${proof.wordsCompared} words differ from a second rendering`);
  findings.end();

  if (madeAgain) {
    const reduction = await measureReduction(document.content, signal);
    const again = describePack({ document, profile, state, scale, measure, proof, reduction });
    again.vectors.forEach((meant, i) => {
      const { name: found } = vectors[i]!;
      if (found !== meant.name) findings.add(found, `should be named ${meant.name}`);
    });
    const files: Manifest['files'] = [...again.vectors];
    for (const entry of [...again.before, ...again.after]) {
      throwIfCancelled(signal);
      const tally = createTally();
      for (const chunk of tally.through(entry.chunks())) void chunk;
      files.push({ name: entry.name, role: entry.role, ...tally.result() });
    }
    for (const file of files) {
      const said = manifest.files.find((one) => one.name === file.name);
      if (!said) findings.add(file.name, 'is missing');
      else if (said.sha256 !== file.sha256 || said.role !== file.role)
        findings.add(file.name, 'differs from what the document gives');
    }
    const entry = entries.find((one) => one.name === 'manifest.json');
    const stored = entry ? (await readSmallEntry(handle, entry, mostManifestBytes)).toString('utf8') : '';
    if (findings.issues.length === 0 && stored !== manifestTextOf(again.manifestOf(files)))
      findings.add('manifest.json', 'differs from what the document gives');
    findings.end();
  }
  const { db } = proof.evm.all;
  return {
    manifest,
    entries: entries.length,
    wordsCompared: proof.wordsCompared,
    evmDb: db !== null && Number.isFinite(db) ? db : null,
    madeAgain,
  };
}

export interface VerifyOptions {
  signal?: AbortSignal | undefined;
  threads?: WorkThreads | undefined;
}

/** Reads a pack again: the zip's sums, every digest, every word against a new synthesis, and every other entry made anew. Writes nothing. */
export async function verifyPack(file: string, options: VerifyOptions = {}): Promise<VerifyResult> {
  let handle: FileHandle | null = null;
  try {
    handle = await open(file, 'r');
    if (!(await handle.stat()).isFile()) throw damaged('it is no file');
    return { ok: true, verified: await verify(handle, options) };
  } catch (error) {
    const { code, message, issues } = toPackError(error, options.signal);
    return { ok: false, code, message, issues };
  } finally {
    await handle?.close();
  }
}
