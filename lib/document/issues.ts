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

const oneOf = (values: readonly unknown[]): string =>
  values.length === 1 ? `must be ${quoted(values)}` : `must be one of ${quoted(values)}`;

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

// Zod reports the wrong input itself only when asked to, and a contract's caller does not ask: its sentence names the type.
function typeMessage(issue: Extract<RawIssue, { code: 'invalid_type' }>): string {
  const received = /received (\S+)$/.exec(issue.message)?.[1];
  if (received === 'undefined') return 'is missing';
  if (received === 'NaN' || received === 'Infinity' || received === '-Infinity') return 'must be a finite number';
  return `must be ${typeWords[issue.expected] ?? issue.expected}`;
}

function sizeMessage(issue: Extract<RawIssue, { code: 'too_big' | 'too_small' }>): string {
  const isMost = issue.code === 'too_big';
  const limit = String(isMost ? issue.maximum : issue.minimum);
  const units: Record<string, [one: string, many: string]> = {
    string: ['character', 'characters'],
    array: ['entry', 'entries'],
  };
  const unit = units[issue.origin]?.[limit === '1' ? 0 : 1];
  if (unit !== undefined) return `must have at ${isMost ? 'most' : 'least'} ${limit} ${unit}`;
  if (issue.inclusive === false) return `must be ${isMost ? 'less' : 'more'} than ${limit}`;
  return `must be at ${isMost ? 'most' : 'least'} ${limit}`;
}

function messageOf(issue: RawIssue): string {
  switch (issue.code) {
    case 'invalid_type':
      return typeMessage(issue);
    case 'too_big':
    case 'too_small':
      return sizeMessage(issue);
    case 'invalid_value':
      return oneOf(issue.values);
    case 'invalid_union':
      return 'options' in issue && Array.isArray(issue.options)
        ? oneOf(issue.options)
        : 'is of no kind that this version knows';
    default:
      return issue.message;
  }
}

/** Words for schemas that bring none of their own: an error map of zod's, for one parse. */
export function schemaWords(issue: z.core.$ZodRawIssue): string | undefined {
  switch (issue.code) {
    case 'invalid_type':
      return issue.input === undefined ? 'is missing' : `must be ${typeWords[issue.expected] ?? issue.expected}`;
    case 'too_big':
    case 'too_small':
      return sizeMessage(issue as Parameters<typeof sizeMessage>[0]);
    case 'invalid_value':
      return oneOf(issue.values as unknown[]);
    case 'invalid_format':
      return 'has not the form it must have';
    default:
      return undefined;
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

  /** True once the list is full, and then counts one: spares a loop the words of an issue that nobody will read. */
  countsOnly(): boolean {
    if (this.listed.length < mostIssues) return false;
    this.unlisted += 1;
    return true;
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
