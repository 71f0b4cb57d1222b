import type { z } from 'zod';

/** What is wrong with a stored thing. Codes are the API's own (clients branch on them, never on the message). */
export type IssueCode = 'invalid' | 'too_large' | 'not_supported_yet' | 'malformed';

export interface Issue {
  /** RFC 6901 JSON Pointer of the field; '' is the whole file. */
  pointer: string;
  message: string;
  code: IssueCode;
}

export type ParseFailure = {
  ok: false;
  issues: Issue[];
  /** How many issues were found beyond those listed. */ more: number;
};
export type ParseResult<T> = { ok: true; value: T } | ParseFailure;

/** A list of issues ends here; the rest is counted. */
export const mostIssues = 50;

export function pointerOf(path: readonly PropertyKey[]): string {
  return path.map((step) => `/${String(step).replace(/~/g, '~0').replace(/\//g, '~1')}`).join('');
}

export function failure(code: IssueCode, pointer: string, message: string): ParseFailure {
  return { ok: false, issues: [{ pointer, message, code }], more: 0 };
}

interface CustomParams {
  code?: IssueCode;
  more?: number;
}

type RawIssue = z.core.$ZodIssue;

function quoted(values: readonly unknown[]): string {
  return values.map((value) => (typeof value === 'string' ? `"${value}"` : String(value))).join(', ');
}

const typeWords: Record<string, string> = {
  number: 'a number',
  int: 'a whole number',
  string: 'text',
  boolean: 'true or false',
  array: 'a list',
  tuple: 'a list',
  object: 'an object',
  null: 'null',
};

function typeMessage(issue: Extract<RawIssue, { code: 'invalid_type' }>): string {
  if (issue.input === undefined) return 'is missing';
  if (typeof issue.input === 'number' && !Number.isFinite(issue.input)) return 'must be a finite number';
  if ((issue.expected as string) === 'int' && typeof issue.input === 'number') return 'must be a whole number';
  return `must be ${typeWords[issue.expected] ?? issue.expected}`;
}

function sizeMessage(issue: Extract<RawIssue, { code: 'too_big' | 'too_small' }>): string {
  const most = issue.code === 'too_big';
  const limit = String(most ? issue.maximum : issue.minimum);
  const strictly = issue.inclusive === false;
  switch (issue.origin) {
    case 'string':
      return most ? `must have at most ${limit} characters` : `must have at least ${limit} characters`;
    case 'array':
      return most ? `must have at most ${limit} entries` : `must have at least ${limit} entries`;
    default:
      if (most) return strictly ? `must be less than ${limit}` : `must be at most ${limit}`;
      return strictly ? `must be more than ${limit}` : `must be at least ${limit}`;
  }
}

function messageOf(issue: RawIssue): string {
  switch (issue.code) {
    case 'invalid_type':
      return typeMessage(issue);
    case 'too_big':
    case 'too_small':
      return sizeMessage(issue);
    case 'invalid_value':
      if (issue.input === undefined) return 'is missing';
      return issue.values.length === 1 ? `must be ${quoted(issue.values)}` : `must be one of ${quoted(issue.values)}`;
    case 'invalid_union':
      return issue.input === undefined ? 'is missing' : 'is no kind that this version knows';
    default:
      return issue.message;
  }
}

/** Turns zod's issues into ours: one line a field, at most 50, the rest counted. */
export function issuesOf(error: { issues: readonly RawIssue[] }): ParseFailure {
  const issues: Issue[] = [];
  let more = 0;
  const add = (path: readonly PropertyKey[], message: string, code: IssueCode): void => {
    if (issues.length < mostIssues) issues.push({ pointer: pointerOf(path), message, code });
    else more += 1;
  };
  for (const issue of error.issues) {
    if (issue.code === 'unrecognized_keys') {
      for (const key of issue.keys) add([...issue.path, key], 'is no key of this version', 'invalid');
      continue;
    }
    const params = issue.code === 'custom' ? (issue.params as CustomParams | undefined) : undefined;
    add(issue.path, messageOf(issue), params?.code ?? 'invalid');
    more += params?.more ?? 0;
  }
  return { ok: false, issues, more };
}

/** One issue of a check of ours inside zod. `more` counts like issues that were found and not listed. */
export function customIssue(
  path: readonly PropertyKey[],
  message: string,
  input: unknown,
  params: CustomParams = {},
): z.core.$ZodRawIssue {
  return { code: 'custom', path: [...path], message, input, params: { ...params }, continue: true };
}

/** Collects the issues of a plain loop over a big array: lists 50, counts the rest. */
export class LoopIssues {
  private readonly listed: { path: readonly PropertyKey[]; message: string }[] = [];
  private unlisted = 0;

  add(path: readonly PropertyKey[], message: string): void {
    if (this.listed.length < mostIssues) this.listed.push({ path, message });
    else this.unlisted += 1;
  }

  get isEmpty(): boolean {
    return this.listed.length === 0;
  }

  flush(into: z.core.$ZodRawIssue[], under: readonly PropertyKey[] = []): void {
    this.listed.forEach(({ path, message }, at) => {
      const last = at === this.listed.length - 1;
      into.push(
        customIssue([...under, ...path], message, undefined, last && this.unlisted > 0 ? { more: this.unlisted } : {}),
      );
    });
  }
}
