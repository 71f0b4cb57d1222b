import type { z } from 'zod';
import type { Checked } from '@/lib/contracts/endpoint';
import type { Issue } from '@/lib/contracts/problem';

/** Deeper than any body of ours; a document itself is bound tighter by its own check. */
const DEEPEST_NESTING = 24;
const MOST_ISSUES = 50;

/** True where brackets nest deeper than allowed; one pass over the bytes, before a parser recurses over them. */
export function isNestedTooDeep(json: Uint8Array, deepest = DEEPEST_NESTING): boolean {
  const [quote, backslash, openList, closeList, openObject, closeObject] = [0x22, 0x5c, 0x5b, 0x5d, 0x7b, 0x7d];
  let depth = 0;
  let isInString = false;
  for (let i = 0; i < json.length; i += 1) {
    const byte = json[i];
    if (isInString) {
      if (byte === backslash) i += 1;
      else if (byte === quote) isInString = false;
    } else if (byte === quote) isInString = true;
    else if (byte === openList || byte === openObject) {
      depth += 1;
      if (depth > deepest) return true;
    } else if (byte === closeList || byte === closeObject) depth -= 1;
  }
  return false;
}

/** RFC 6901. */
function toPointer(path: readonly PropertyKey[], base: string): string {
  return base + path.map((part) => `/${String(part).replaceAll('~', '~0').replaceAll('/', '~1')}`).join('');
}

export function checkWith<S extends z.ZodType>(schema: S, value: unknown, base = ''): Checked<z.output<S>> {
  const parsed = schema.safeParse(value);
  if (parsed.success) return { ok: true, value: parsed.data };
  const all = parsed.error.issues;
  const issues = all
    .slice(0, MOST_ISSUES)
    .map((issue): Issue => ({ pointer: toPointer(issue.path, base), message: issue.message, code: issue.code }));
  return { ok: false, issues, more: all.length - issues.length };
}

export type CheckedBody = Checked<unknown> | { ok: false; malformed: string };

export interface BodyCheck {
  body?: z.ZodType;
  checkBody?: (body: unknown) => Checked<unknown>;
}

/** Bytes to a checked body. Runs in the server's thread for small bodies, in a thread of its own for large ones. */
export function checkBodyBytes(check: BodyCheck, bytes: Uint8Array): CheckedBody {
  if (isNestedTooDeep(bytes)) return { ok: false, malformed: 'The body is nested too deep.' };
  let value: unknown;
  try {
    value = JSON.parse(new TextDecoder('utf-8', { fatal: true, ignoreBOM: true }).decode(bytes));
  } catch {
    return { ok: false, malformed: 'The body is not JSON in UTF-8.' };
  }
  if (check.checkBody) return check.checkBody(value);
  return check.body ? checkWith(check.body, value) : { ok: true, value: undefined };
}
