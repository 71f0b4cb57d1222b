import { z } from './zod';
import { customIssue, LoopIssues } from './issues';

export const most32 = 2 ** 31 - 1;

const isMinusZero = (value: number): boolean => Object.is(value, -0);
const noMinusZero = 'must be 0, not −0: equal content has one spelling';

/** A whole number of a range, and never −0. */
export const whole = (least: number, most: number) =>
  z
    .int()
    .min(least)
    .max(most)
    .refine((value) => !isMinusZero(value), noMinusZero);

/** A finite number of a range, and never −0. */
export const real = (least?: number, most?: number) => {
  let schema = z.number();
  if (least !== undefined) schema = schema.min(least);
  if (most !== undefined) schema = schema.max(most);
  return schema.refine((value) => !isMinusZero(value), noMinusZero);
};

function textProblem(value: string, least: number, most: number): string | null {
  if (value.length > 2 * most) return `must have at most ${most} characters`;
  // A flagged surrogate class matches lone ones alone; they have no UTF-8 and no canonical JSON.
  if (/\p{Surrogate}/u.test(value)) return 'must be whole Unicode characters (half a surrogate pair found)';
  const characters = [...value].length;
  if (characters < least) return least === 1 ? 'must not be empty' : `must have at least ${least} characters`;
  return characters > most ? `must have at most ${most} characters` : null;
}

function textSchema(least: number, most: number, problem: (value: string) => string | null) {
  return z
    .string()
    .check((payload) => {
      const found = textProblem(payload.value, least, most) ?? problem(payload.value);
      if (found !== null) payload.issues.push(customIssue([], found, undefined));
    })
    .meta({ minLength: least, maxLength: most });
}

/** Free text of several lines, lengths counted in characters (code points). */
export const freeText = (most: number) => textSchema(0, most, () => null);

const lineProblem = (value: string): string | null =>
  /\p{Cc}/u.test(value) ? 'must have no control characters (a line break or tab is one)' : null;

/** One line of text. */
export const lineText = (least: number, most: number) => textSchema(least, most, lineProblem);

/** The name of an ink, stream, marker or uploaded bit file: 1…60 characters in one spelling. */
export const nameText = () =>
  textSchema(
    1,
    60,
    (value) => lineProblem(value) ?? (value.normalize('NFC') === value ? null : 'must be in Unicode form NFC'),
  );

/** A list whose length is judged before its entries are, so that a million wrong entries cost one issue. */
export const list = <T extends z.ZodType>(element: T, least: number, most: number) =>
  z.preprocess((value, context) => {
    if (!Array.isArray(value) || value.length <= most) return value;
    context.issues.push(customIssue([], `must have at most ${most} entries, not ${value.length}`, undefined));
    return z.NEVER;
  }, z.array(element).min(least).max(most));

type JsonSchemaMeta = Record<string, unknown>;

/**
 * A big array checked by one plain loop: zod makes an object per entry, which took seconds and gigabytes for a hostile body.
 * `json` describes it for the generated JSON Schemas.
 */
export const bigArray = <T>(check: (value: readonly unknown[], issues: LoopIssues) => void, json: JsonSchemaMeta) =>
  z
    .any()
    .check((payload) => {
      const value: unknown = payload.value;
      if (value === undefined) payload.issues.push(customIssue([], 'is missing', undefined));
      else if (!Array.isArray(value)) payload.issues.push(customIssue([], 'must be a list', undefined));
      else {
        const issues = new LoopIssues();
        check(value, issues);
        issues.flush(payload.issues);
      }
    })
    .meta(json) as unknown as z.ZodType<T, T>;

/** For ranges within ±2^31, where x|0 is the quickest test; −0 fails by its reciprocal. */
export const isWholeIn = (value: unknown, least: number, most: number): value is number =>
  typeof value === 'number' &&
  value >= least &&
  value <= most &&
  (value | 0) === value &&
  (value !== 0 || 1 / value > 0);

export const isRealIn = (value: unknown, least: number, most: number): value is number =>
  typeof value === 'number' && value >= least && value <= most && !isMinusZero(value);

/** An exact positive rational in lowest terms. */
export const fraction = () =>
  z.tuple([whole(1, Number.MAX_SAFE_INTEGER), whole(1, Number.MAX_SAFE_INTEGER)]).check((payload) => {
    if (payload.issues.length > 0) return;
    const divisor = greatestCommonDivisor(...payload.value);
    if (divisor !== 1)
      payload.issues.push(customIssue([], `must be reduced: both have the factor ${divisor}`, undefined));
  });

export function greatestCommonDivisor(a: number, b: number): number {
  while (b !== 0) [a, b] = [b, a % b];
  return a;
}
