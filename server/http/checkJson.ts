import type { z } from 'zod';
import type { Checked } from '@/lib/contracts/endpoint';
import type { Issue } from '@/lib/contracts/problem';
import { mostIssues, pointerOf, schemaWords } from '@/lib/document/issues';
import { readJson } from '@/lib/document/readJson';

/** Values of a request by a contract's schema: its own words where it has some, else the words of documents. */
export function checkWith<S extends z.ZodType>(schema: S, value: unknown, base = ''): Checked<z.output<S>> {
  const parsed = schema.safeParse(value, { error: schemaWords });
  if (parsed.success) return { ok: true, value: parsed.data };
  const all = parsed.error.issues.flatMap((issue): Issue[] => {
    const at = (path: readonly PropertyKey[], message: string) => ({
      pointer: base + pointerOf(path),
      message,
      code: 'invalid',
    });
    return issue.code === 'unrecognized_keys'
      ? issue.keys.map((key) => at([...issue.path, key], 'is no key of this version'))
      : [at(issue.path, issue.message)];
  });
  return { ok: false, issues: all.slice(0, mostIssues), more: Math.max(0, all.length - mostIssues) };
}

/** `unread`: no JSON value that could be checked; what is wrong, and where. */
export type CheckedBody = Checked<unknown> | { ok: false; unread: Issue };

export interface BodyCheck {
  body?: z.ZodType;
  checkBody?: (body: unknown) => Checked<unknown>;
}

/**
 * Bytes to a checked body. Runs in the server's thread for small bodies, in a thread of its own for large ones. Read as a file is, so that
 * page, API and command line refuse the same with the same words.
 */
export function checkBodyBytes(check: BodyCheck, bytes: Uint8Array): CheckedBody {
  const json = readJson(bytes);
  if (!json.ok) return { ok: false, unread: json.issues[0]! };
  if (check.checkBody) return check.checkBody(json.value);
  return check.body ? checkWith(check.body, json.value) : { ok: true, value: undefined };
}
