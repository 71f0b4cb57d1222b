import { failure, type ParseFailure } from './issues';

/** The newest version that this installation reads and the one that it writes. */
export const newestVersion = 1;

const kinds: Record<string, string> = {
  'combwright.waveform': 'waveform',
  'combwright.bench': 'bench profile',
  'combwright.manifest': 'manifest',
};

/**
 * The gate of versions, before the schema: a file of another kind or of a later version gets one sentence, not a list of wrong
 * fields. Version 1 is the first, so nothing is rewritten yet; an older version is brought up to the newest here.
 */
export function migrate(value: unknown, format: string): { ok: true; value: unknown } | ParseFailure {
  if (typeof value !== 'object' || value === null || Array.isArray(value)) {
    return failure('invalid', '', `is no ${kinds[format]}: it must be an object`);
  }
  const found = value as { format?: unknown; version?: unknown };
  if (found.format !== format) {
    const other = typeof found.format === 'string' ? kinds[found.format] : undefined;
    const message = other === undefined ? `must be "${format}"` : `must be "${format}": this file is a ${other}`;
    return failure('invalid', '/format', found.format === undefined ? 'is missing' : message);
  }
  const { version } = found;
  if (typeof version === 'number' && Number.isInteger(version) && version > newestVersion) {
    const text = `This document has version ${version}. This installation reads up to ${newestVersion}.`;
    return failure('invalid', '/version', text);
  }
  return { ok: true, value };
}
