import { failure, pointerOf, type ParseFailure } from './issues';

/** A file is at most 32 MiB of UTF-8. */
export const mostFileBytes = 32 * 1024 * 1024;
const mostDepth = 16;
// Far above what a file of ours has (a manifest's constellation tables have most); below what makes the parser itself slow.
const mostObjects = 2 ** 19;
const mostKeys = 256;

// The web platform's decoder, which Node has too; this room's types know neither.
declare const TextDecoder: new (label: string, options: { fatal: boolean }) => { decode(bytes: Uint8Array): string };

const quote = 34;
const comma = 44;
const zero = 48;
const nine = 57;
const openList = 91;
const backslash = 92;
const closeList = 93;
const openObject = 123;
const closeObject = 125;
const letterI = 73;
const letterN = 78;

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

/** Where the scan stands: one place a level, reused, because a hostile body opens millions of objects. */
class Nesting {
  depth = 0;
  /** The key or the index that each level is at. */
  readonly steps: (string | number)[] = new Array<string | number>(mostDepth).fill(0);
  readonly isObject: boolean[] = new Array<boolean>(mostDepth).fill(false);
  private readonly keys = Array.from({ length: mostDepth }, () => new Set<string>());

  open(isObject: boolean): void {
    this.steps[this.depth] = 0;
    this.isObject[this.depth] = isObject;
    if (isObject && this.keys[this.depth]!.size > 0) this.keys[this.depth] = new Set();
    this.depth += 1;
  }

  /** What is wrong with one more key of the object. */
  takeKey(key: string): ParseFailure | null {
    const keys = this.keys[this.depth - 1]!;
    if (keys.size === mostKeys) {
      return failure('malformed', pointerOf(this.steps.slice(0, this.depth - 1)), `has more than ${mostKeys} keys`);
    }
    this.steps[this.depth - 1] = key;
    if (keys.has(key)) return this.fail('stands twice in its object');
    keys.add(key);
    return null;
  }

  fail(message: string): ParseFailure {
    return failure('malformed', pointerOf(this.steps.slice(0, this.depth)), message);
  }
}

/**
 * One pass over the text before it is parsed, for what JSON.parse lets through or cannot bear: nesting deeper than 16, a key
 * that stands twice (the last would win in silence), NaN and Infinity with a message of their own.
 */
function scan(text: string): ParseFailure | null {
  const nesting = new Nesting();
  const { steps } = nesting;
  let objects = 0;
  let isInObject = false;
  let expectsKey = false;
  for (let at = 0; at < text.length; at += 1) {
    const code = text.charCodeAt(at);
    if (code >= zero && code <= nine) continue;
    if (code === comma) {
      if (isInObject) expectsKey = true;
      else if (nesting.depth > 0) (steps[nesting.depth - 1] as number) += 1;
    } else if (code === quote) {
      const end = endOfString(text, at);
      if (expectsKey) {
        expectsKey = false;
        const found = nesting.takeKey(keyOf(text.slice(at, end)));
        if (found !== null) return found;
      }
      at = end - 1;
    } else if (code === openObject || code === openList) {
      if (nesting.depth === mostDepth) return failure('malformed', '', `is nested deeper than ${mostDepth} levels`);
      isInObject = code === openObject;
      if (isInObject) objects += 1;
      if (objects > mostObjects) return failure('too_large', '', `holds more than ${mostObjects} objects`);
      expectsKey = isInObject;
      nesting.open(isInObject);
    } else if (code === closeObject || code === closeList) {
      if (nesting.depth === 0) return null; // no JSON: the parser says where
      nesting.depth -= 1;
      isInObject = nesting.depth > 0 && nesting.isObject[nesting.depth - 1]!;
      expectsKey = false;
    } else if (code === letterN || code === letterI) {
      return nesting.fail('is not JSON: there is no NaN or Infinity in it');
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
