import { open, type FileHandle } from 'node:fs/promises';
import type { Manifest } from '@/lib/document/manifestSchema';
import { parseBenchProfile, parseManifest, parseWaveformDocument } from '@/lib/document/parse';
import type { ParseResult } from '@/lib/document/issues';
import {
  layoutOfBench,
  vectorFiles,
  type BenchProfile,
  type ByteSource,
  type CaptureLayout,
  type WaveformDocument,
} from '@/lib/synth';
import { PackError } from '../packs/packError.ts';
import { readSmallEntry, readZipEntries, type ZipEntry } from '../packs/zipReader.ts';
import { fileBytes } from './captureFiles.ts';

const mostBytes = 256 * 1024 * 1024;

/** A pack opened for its parts. Nothing is proven: that is verify's work. */
export interface OpenPack {
  manifest: Manifest;
  document: WaveformDocument;
  profile: BenchProfile;
  /** The vector's files and how they are read. */
  vector: { sources: ByteSource[]; layout: CaptureLayout };
  /** "edition 4 of PA ladder 20 MHz", "a draft of …". */
  words: string;
  close(): Promise<void>;
}

async function parsed<T>(
  handle: FileHandle,
  entries: ZipEntry[],
  name: string,
  parse: (bytes: Uint8Array) => ParseResult<T>,
): Promise<T> {
  const entry = entries.find((one) => one.name === name);
  if (!entry) throw new PackError('invalid', `This is not a whole pack: ${name} is missing.`);
  const result = parse(await readSmallEntry(handle, entry, mostBytes));
  if (!result.ok) throw new PackError('invalid', `This is not a whole pack: ${name} is not valid.`);
  return result.value;
}

/** Opens a pack; throws PackError where it is none. The caller closes it. */
export async function openPack(file: string): Promise<OpenPack> {
  const handle = await open(file, 'r');
  try {
    const entries = await readZipEntries(handle);
    const manifest = await parsed(handle, entries, 'manifest.json', parseManifest);
    const document = await parsed(handle, entries, 'document.combwright.json', parseWaveformDocument);
    const profile = await parsed(handle, entries, 'bench.json', parseBenchProfile);
    const files = vectorFiles(document.content, profile.content);
    const sources = files.map(({ role }) => {
      const name = manifest.files.find((one) => one.role === role)?.name;
      const entry = entries.find((one) => one.name === name);
      if (!entry) throw new PackError('invalid', 'This is not a whole pack: its vector is missing.');
      return fileBytes(handle.fd, entry.offsetBytes, entry.bytes);
    });
    const state = manifest.edition === null ? 'a draft' : `edition ${manifest.edition}`;
    return {
      manifest,
      document,
      profile,
      vector: { sources, layout: { ...layoutOfBench(profile.content), headBytes: files[0]!.head.length } },
      words: `${state} of ${document.about.title}`,
      close: () => handle.close(),
    };
  } catch (error) {
    await handle.close();
    throw error;
  }
}
