import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex, utf8ToBytes } from '@noble/hashes/utils.js';
import canonicalize from 'canonicalize';
import type { BenchContent, BenchProfile, WaveformContent, WaveformDocument, WaveformIntent } from '@/lib/synth/index';

const isFinite = (value: unknown): boolean => typeof value === 'number' && Number.isFinite(value);

/**
 * RFC 8785 canonical JSON. Throws on what JSON cannot hold (NaN, a lone surrogate, undefined alone). Objects and lists of
 * numbers are written here, the rest by the package: run-length rows are lists of numbers, four million of them at most, and
 * ECMAScript's own number text is what the RFC asks for.
 */
export function canonicalJson(value: unknown): string {
  if (Array.isArray(value)) {
    return value.every(isFinite) ? JSON.stringify(value) : `[${value.map(canonicalJson).join(',')}]`;
  }
  if (typeof value === 'object' && value !== null && Object.getPrototypeOf(value) === Object.prototype) {
    const entries = Object.entries(value).filter(([, entry]) => entry !== undefined);
    entries.sort(([a], [b]) => (a < b ? -1 : 1)); // by UTF-16 code units, as < compares
    return `{${entries.map(([key, entry]) => `${canonicalJson(key)}:${canonicalJson(entry)}`).join(',')}}`;
  }
  const text = canonicalize(value);
  if (text === undefined) throw new TypeError('no JSON value');
  return text;
}

/** `sha256:` and the hexadecimal SHA-256 of a value's canonical JSON. */
export function digestOf(value: unknown): string {
  return digestOfCanonical(canonicalJson(value));
}

/** The same of text that is canonical JSON already. */
export function digestOfCanonical(text: string): string {
  return `sha256:${bytesToHex(sha256(utf8ToBytes(text)))}`;
}

export const contentDigest = (content: WaveformContent): string => digestOf(content);
export const intentDigest = (intent: WaveformIntent): string => digestOf(intent);
/** Of the whole file, title and notes too. */
export const documentDigest = (document: WaveformDocument): string => digestOf(document);
/** Of what a bench profile says about the generator. */
export const profileDigest = (content: BenchContent): string => digestOf(content);
/** Of the whole profile, name and notes too. */
export const profileFileDigest = (profile: BenchProfile): string => digestOf(profile);

export interface PackKeyParts {
  documentDigest: string;
  profileFileDigest: string;
  /** "draft" or the edition's number. */
  state: 'draft' | number;
  synthVersion: string;
  packVersion: string;
}

/** Names the bytes of a pack: equal parts, equal pack. */
export function packKey({
  documentDigest: document,
  profileFileDigest: profile,
  state,
  synthVersion,
  packVersion,
}: PackKeyParts): string {
  return digestOf({ documentDigest: document, profileFileDigest: profile, state, synthVersion, packVersion });
}
