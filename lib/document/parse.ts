import type { z } from 'zod';
import type { BenchProfile, WaveformDocument } from '@/lib/synth/index';
import { benchProfileSchema } from './benchSchema';
import { issuesOf, type ParseResult } from './issues';
import { manifestSchema, type Manifest } from './manifestSchema';
import { migrate } from './migrate';
import { readJson } from './readJson';
import { waveformDocumentSchema } from './waveformSchema';

function parseWith<T>(input: unknown, format: string, schema: z.ZodType<T>): ParseResult<T> {
  const json = readJson(input);
  if (!json.ok) return json;
  const current = migrate(json.value, format);
  if (!current.ok) return current;
  const parsed = schema.safeParse(current.value);
  return parsed.success ? { ok: true, value: parsed.data } : issuesOf(parsed.error);
}

/**
 * Reads a waveform document from JSON text, UTF-8 bytes or a parsed value, and judges all of it: shape, ranges and the rules
 * across fields. Never throws.
 */
export function parseWaveformDocument(input: unknown): ParseResult<WaveformDocument> {
  return parseWith(input, 'combwright.waveform', waveformDocumentSchema);
}

/** The same for a bench profile; `layoutIssues` names what no file can be written in. */
export function parseBenchProfile(input: unknown): ParseResult<BenchProfile> {
  return parseWith(input, 'combwright.bench', benchProfileSchema);
}

/** The same for a pack's manifest. */
export function parseManifest(input: unknown): ParseResult<Manifest> {
  return parseWith(input, 'combwright.manifest', manifestSchema);
}
