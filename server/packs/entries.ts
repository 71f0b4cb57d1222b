import { canonicalJson } from '@/lib/document/digest';
import { sidednessWords } from '@/lib/document/sidedness';
import type { Manifest } from '@/lib/document/manifestSchema';
import {
  createSentValues,
  deriveFigures,
  markerBytes,
  synthVersion,
  vectorFiles,
  type BenchProfile,
  type CellValues,
  type FrameLayout,
  type WaveformDocument,
  type WordScale,
} from '@/lib/synth';
import {
  cellsCsvChunks,
  listedRepeats,
  listsCells,
  payloadChunks,
  referenceChunks,
  usedStreams,
  type PayloadCount,
} from './entryChunks.ts';
import type { MeasuredReduction } from './measureReduction.ts';
import { payloadName } from './manifest/describeInks.ts';
import type { PackState } from './packTypes.ts';
import { packVersion } from './packVersion.ts';
import { readmeText } from './readme.ts';
import { sigmfDatatype, sigmfMeta } from './sigmfMeta.ts';
import type { VectorProof } from './vectorProof.ts';

export type FileRole = Manifest['files'][number]['role'];

/** One entry of the pack beside vector and manifest; `chunks` may be asked again and gives the same bytes. */
export interface SideEntry {
  name: string;
  role: FileRole;
  chunks: () => Iterable<Uint8Array>;
}

export interface EntryInput {
  document: WaveformDocument;
  profile: BenchProfile;
  state: PackState;
  baseName: string;
  layout: FrameLayout;
  values: CellValues;
  scale: WordScale;
  proof: VectorProof;
  /** Filled as the payload entries are made. */
  payloads: Map<number, PayloadCount>;
  cardText: string;
  /** Where a symbol's peak was lowered, values are listed as they are sent, too. */
  reduction: MeasuredReduction | null;
}

const referenceName = 'reference.cf32';
const sentReferenceName = 'reference-sent.cf32';

export const vectorNameOf = (baseName: string, ending: string, profile: BenchProfile): string =>
  `${baseName}${ending}.${profile.content.fileName.extension}`;

/** The vector's entries, one or two, as the manifest lists them. */
export function vectorEntriesOf(baseName: string, profile: BenchProfile, proof: VectorProof): Manifest['files'] {
  return proof.files.map(({ role, ending, bytes, sha256 }) => ({
    name: vectorNameOf(baseName, ending, profile),
    role,
    bytes,
    sha256,
  }));
}

/** What a pack is to those who hold it; a draft that is its profile's sidedness waveform is no draft of anything. */
export function stateWordsOf(state: PackState, document: WaveformDocument, profile: BenchProfile): string {
  if (state !== 'draft') return `Released, edition ${state}.`;
  if (sidednessWords(document, profile) !== null) return 'Sidedness check of a bench profile, no released waveform.';
  return 'Draft, not for the bench.';
}

/** Saturation that the document asked for is said wherever the vector is described. */
export function saturatedWordsOf({ saturated }: VectorProof): string | null {
  if (saturated.components === 0) return null;
  return `${saturated.samples} samples pass full scale in ${saturated.components} components: the level refers to the RMS`;
}

const text = (value: string): Uint8Array[] => [Buffer.from(value, 'utf8')];

function* markerChunks(input: EntryInput): Generator<Uint8Array> {
  const source = markerBytes(input.document.content);
  for (;;) {
    const block = new Uint8Array(1 << 18);
    const count = source.read(block);
    if (count === 0) return;
    yield block.subarray(0, count);
  }
}

const isReduced = ({ reduction }: EntryInput): boolean => reduction !== null && reduction.report.passes > 0;

const wantsMarkers = ({ document, profile }: EntryInput): boolean =>
  document.content.markers.length > 0 && profile.content.markers.packing === 'bytes';

const headBytesOf = ({ document, profile }: EntryInput): number =>
  vectorFiles(document.content, profile.content)[0]!.head.length;

function readme(input: EntryInput): string {
  const { document, profile, layout, values, baseName } = input;
  const { content } = document;
  const { sampleClock, sampleClockHz } = deriveFigures(content);
  const { numerator, denominator } = sampleClock;
  const type = sigmfDatatype(profile.content);
  return readmeText({
    baseName,
    stateWords: stateWordsOf(input.state, document, profile),
    sidednessWords: sidednessWords(document, profile),
    versions: `Made by Combwright, synthesis ${synthVersion}, pack ${packVersion}.`,
    vectors: vectorEntriesOf(baseName, profile, input.proof),
    vectorSha256Hex: input.proof.sha256,
    headBytes: headBytesOf(input),
    metaMissing: 'missing' in type ? type.missing : null,
    markersName: wantsMarkers(input) ? `${baseName}-markers.bin` : null,
    bench: profile.content,
    scale: input.scale.scale,
    samples: layout.samples,
    clockWords:
      denominator === 1n
        ? `${numerator} Hz, exactly`
        : `${numerator}/${denominator} Hz exactly, about ${sampleClockHz} Hz`,
    mode: layout.mode,
    repeats: layout.repeats,
    referenceRepeats: listedRepeats(values),
    cellsWritten: listsCells(values),
    payloadNames: usedStreams(values).map(payloadName),
    frequencyOffsetHz: content.frequencyOffsetHz,
    saturatedWords: saturatedWordsOf(input.proof),
    sentReferenceName: isReduced(input) ? sentReferenceName : null,
  });
}

function metaOf(input: EntryInput): object | null {
  const { document, profile, layout, baseName } = input;
  return sigmfMeta({
    bench: profile.content,
    sampleClockHz: deriveFigures(document.content).sampleClockHz,
    sha512Hex: input.proof.sha512,
    headBytes: headBytesOf(input),
    datasetName: vectorEntriesOf(baseName, profile, input.proof)[0]!.name,
    baseName,
    title: document.about.title,
    packNote: stateWordsOf(input.state, document, profile),
    symbols: Array.from({ length: layout.symbolCount }, (_, symbol) => ({
      startSample: layout.symbolStarts[symbol]!,
      samples: layout.prefixes[symbol]! + layout.usefulSamples,
    })),
  });
}

/** Everything beside vector and manifest, in two groups since the manifest stands between them. The order is fixed. */
export function sideEntries(input: EntryInput): { before: SideEntry[]; after: SideEntry[] } {
  const { document, profile, values, baseName, payloads } = input;
  const meta = metaOf(input);
  const before: SideEntry[] = [];
  if (meta !== null) {
    const bytes = text(`${JSON.stringify(meta, null, 2)}\n`);
    before.push({ name: `${baseName}.sigmf-meta`, role: 'meta', chunks: () => bytes });
  }
  if (wantsMarkers(input))
    before.push({ name: `${baseName}-markers.bin`, role: 'markers', chunks: () => markerChunks(input) });
  for (const stream of usedStreams(values)) {
    const count: PayloadCount = { bits: 0, ones: 0 };
    payloads.set(stream, count);
    before.push({ name: payloadName(stream), role: 'payload', chunks: () => payloadChunks(values, stream, count) });
  }
  before.push({ name: referenceName, role: 'reference', chunks: () => referenceChunks(values) });
  if (isReduced(input)) {
    const powerBefore = () => input.reduction!.powerBefore;
    before.push({
      name: sentReferenceName,
      role: 'referenceSent',
      chunks: () => referenceChunks(createSentValues(document.content, { powerBefore })),
    });
  }
  if (listsCells(values)) before.push({ name: 'cells.csv', role: 'cells', chunks: () => cellsCsvChunks(values) });
  // Canonical JSON, so that the files' own SHA-256 are the digests by which the document and the profile are named.
  return {
    before,
    after: [
      { name: 'document.combwright.json', role: 'document', chunks: () => text(canonicalJson(document)) },
      { name: 'bench.json', role: 'bench', chunks: () => text(canonicalJson(profile)) },
      { name: 'level-card.txt', role: 'card', chunks: () => text(input.cardText) },
      { name: 'README.txt', role: 'readme', chunks: () => text(readme(input)) },
    ],
  };
}
