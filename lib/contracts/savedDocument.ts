import { z } from '@/lib/document/zod';
import { canonicalJson, digestOfCanonical } from '@/lib/document/digest';
import { parseWaveformDocument } from '@/lib/document/parse';
import { waveformDocumentSchema } from '@/lib/document/waveformSchema';
import type { Checked } from './endpoint';

type WaveformDocument = z.infer<typeof waveformDocumentSchema>;
type WaveformContent = WaveformDocument['content'];

/** What the numbers and the grid say at once, without synthesis. Absent parts are null: an empty grid has no span. */
export const revisionNumbersSchema = z
  .object({
    fftSize: z.number().int(),
    subcarrierSpacingHz: z.tuple([z.number(), z.number()]),
    symbolCount: z.number().int(),
    oversampling: z.number().int(),
    /** N · M · spacing. */
    sampleClockHz: z.number(),
    /** (highest − lowest + 1) · spacing. */
    paintedSpanHz: z.number().nullable(),
    lowestSubcarrier: z.number().int().nullable(),
    highestSubcarrier: z.number().int().nullable(),
    /** Samples of the rendered file. */
    fileSamples: z.number().int(),
  })
  .meta({ id: 'RevisionNumbers' });
export type RevisionNumbers = z.infer<typeof revisionNumbersSchema>;

/** A document as it is stored: text and digests, made once where the body is checked, so that a large grid never crosses threads as an object. */
export interface SavedDocument {
  title: string;
  /** Canonical JSON of each part. */
  aboutJson: string;
  intentJson: string;
  contentJson: string;
  contentDigest: string;
  intentDigest: string;
  documentDigest: string;
  numbers: RevisionNumbers;
}

function toSavedDocument({ about, content, intent }: WaveformDocument): SavedDocument {
  const aboutJson = canonicalJson(about);
  const contentJson = canonicalJson(content);
  const intentJson = canonicalJson(intent);
  // RFC 8785 sorts the keys: the canonical whole is its canonical parts in this order.
  const whole = `{"about":${aboutJson},"content":${contentJson},"format":"combwright.waveform","intent":${intentJson},"version":1}`;
  return {
    title: about.title,
    aboutJson,
    intentJson,
    contentJson,
    contentDigest: digestOfCanonical(contentJson),
    intentDigest: digestOfCanonical(intentJson),
    documentDigest: digestOfCanonical(whole),
    numbers: numbersOf(content),
  };
}

/** Judges a body as a document that can be saved. */
export function checkSavedDocument(body: unknown): Checked<SavedDocument> {
  const parsed = parseWaveformDocument(body);
  if (!parsed.ok) return parsed;
  return { ok: true, value: toSavedDocument(parsed.value) };
}

/** What a client sends is a document, what a service gets is its stored form. */
export const savedDocumentSchema = waveformDocumentSchema.transform(toSavedDocument);

/** Lowest and highest used subcarrier of all symbols; null where every cell is null. */
function usedSpan({ grid, fftSize }: WaveformContent): { lowest: number; highest: number } | null {
  const first = -Math.floor(fftSize / 2);
  let lowest = Infinity;
  let highest = -Infinity;
  for (const row of grid.rows) {
    let k = first;
    for (let i = 0; i < row.length; i += 2) {
      const length = row[i]!;
      if (row[i + 1] !== 0) {
        if (k < lowest) lowest = k;
        if (k + length - 1 > highest) highest = k + length - 1;
      }
      k += length;
    }
  }
  return lowest > highest ? null : { lowest, highest };
}

/** What the numbers and the runs say without synthesis. */
export function numbersOf(content: WaveformContent): RevisionNumbers {
  const { fftSize, symbolCount, oversampling, prefixSamples, timing } = content;
  const [numerator, denominator] = content.subcarrierSpacingHz;
  const span = usedSpan(content);
  let frameSamples = symbolCount * fftSize + timing.gapSamples;
  for (let symbol = 0; symbol < symbolCount; symbol += 1) frameSamples += prefixSamples[symbol % prefixSamples.length]!;
  const rampSamples = timing.mode === 'burst' ? content.overlapSamples : 0;
  return {
    fftSize,
    subcarrierSpacingHz: [numerator, denominator],
    symbolCount,
    oversampling,
    sampleClockHz: (fftSize * oversampling * numerator) / denominator,
    paintedSpanHz: span && ((span.highest - span.lowest + 1) * numerator) / denominator,
    lowestSubcarrier: span && span.lowest,
    highestSubcarrier: span && span.highest,
    fileSamples: (timing.repeats * frameSamples + rampSamples) * oversampling + timing.padSamples,
  };
}
