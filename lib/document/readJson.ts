import { failure, pointerOf, type ParseFailure } from './issues';

/** A file is at most 32 MiB of UTF-8. */
export const mostFileBytes = 32 * 1024 * 1024;
const mostDepth = 16;

// The web platform's decoder, which Node has too; this room's types know neither.
declare const TextDecoder: new (label: string, options: { fatal: boolean }) => { decode(bytes: Uint8Array): string };

const quote = 34;
const comma = 44;
const openList = 91;
const backslash = 92;
const closeList = 93;
const openObject = 123;
const closeObject = 125;
const letterI = 73;
const letterN = 78;

interface Level {
  /** Keys so far, of an object; null in a list. */
  keys: Set<string> | null;
  step: string | number;
  expectsKey: boolean;
}

/** The place after a string's closing quote; text.length where it never closes. */
function endOfString(text: string, open: number): number {
  let at = open + 1;
  while (at < text.length) {
    const code = text.charCodeAt(at);
    if (code === quote) return at + 1;
    at += code === backslash ? 2 : 1;
  }
  return text.length;
}

function keyOf(raw: string): string {
  if (!raw.includes('\\')) return raw.slice(1, -1);
  try {
    return JSON.parse(raw) as string;
  } catch {
    return raw;
  }
}

/**
 * One pass over the text before it is parsed, for what JSON.parse lets through or cannot bear: nesting deeper than 16, a key
 * that stands twice (the last would win in silence), NaN and Infinity with a message of their own.
 */
function scan(text: string): ParseFailure | null {
  const levels: Level[] = [];
  let top: Level | undefined;
  for (let at = 0; at < text.length; at += 1) {
    const code = text.charCodeAt(at);
    if (code === quote) {
      const end = endOfString(text, at);
      if (top?.expectsKey === true && top.keys !== null) {
        const key = keyOf(text.slice(at, end));
        top.step = key;
        top.expectsKey = false;
        if (top.keys.has(key))
          return failure('malformed', pointerOf(levels.map(({ step }) => step)), 'stands twice in its object');
        top.keys.add(key);
      }
      at = end - 1;
    } else if (code === comma) {
      if (top === undefined) return null;
      if (top.keys !== null) top.expectsKey = true;
      else top.step = (top.step as number) + 1;
    } else if (code === openObject || code === openList) {
      if (levels.length === mostDepth) return failure('malformed', '', `is nested deeper than ${mostDepth} levels`);
      top =
        code === openObject
          ? { keys: new Set(), step: '', expectsKey: true }
          : { keys: null, step: 0, expectsKey: false };
      levels.push(top);
    } else if (code === closeObject || code === closeList) {
      levels.pop();
      top = levels.at(-1);
    } else if (code === letterN || code === letterI) {
      const pointer = pointerOf(levels.map(({ step }) => step));
      return failure('malformed', pointer, 'is not JSON: there is no NaN or Infinity in it');
    }
  }
  return null;
}

function utf8Length(text: string): number {
  let length = text.length;
  for (let at = 0; at < text.length; at += 1) {
    const code = text.charCodeAt(at);
    if (code > 0x7ff) length += code >= 0xd800 && code <= 0xdfff ? 1 : 2;
    else if (code > 0x7f) length += 1;
  }
  return length;
}

const tooLarge = (): ParseFailure => failure('too_large', '', 'is larger than 32 MiB');

function textOf(bytes: Uint8Array): { ok: true; value: string } | ParseFailure {
  if (bytes.length > mostFileBytes) return tooLarge();
  try {
    return { ok: true, value: new TextDecoder('utf-8', { fatal: true }).decode(bytes) };
  } catch {
    return failure('malformed', '', 'is not UTF-8 text');
  }
}

// By tag: a view of another realm (a worker's, a test runner's) is no instance of this realm's class.
const isBytes = (input: unknown): input is Uint8Array =>
  Object.prototype.toString.call(input) === '[object Uint8Array]';

/** Text or bytes to a JSON value; any other value is taken as parsed already. */
export function readJson(input: unknown): { ok: true; value: unknown } | ParseFailure {
  let text: string;
  if (typeof input === 'string') text = input;
  else if (isBytes(input)) {
    const decoded = textOf(input);
    if (!decoded.ok) return decoded;
    text = decoded.value;
  } else return { ok: true, value: input };
  if (text.length > mostFileBytes || (3 * text.length > mostFileBytes && utf8Length(text) > mostFileBytes))
    return tooLarge();
  const found = scan(text);
  if (found !== null) return found;
  try {
    return { ok: true, value: JSON.parse(text) };
  } catch (error) {
    return failure('malformed', '', `is not JSON: ${(error as Error).message}`);
  }
}
