import { readFileSync } from 'node:fs';
import { join } from 'node:path';

/** A check value from outside, with where it comes from. */
export interface Check<Expected, Input = unknown> {
  id: string;
  title: string;
  /** Standard and clause, textbook, or how it was computed. */
  source: string;
  /** confirmed: compared with a second source; from memory: clause and formula recalled; computed: mathematics. */
  confidence: 'confirmed' | 'from memory' | 'computed';
  input: Input;
  expected: Expected;
}

/** The check of this id from tests/fixtures/checks. */
export function readCheck<Expected, Input = unknown>(id: string): Check<Expected, Input> {
  const path = join(__dirname, '../fixtures/checks', `${id}.json`);
  return JSON.parse(readFileSync(path, 'utf8')) as Check<Expected, Input>;
}

/** How a test names the check it makes. */
export function titleOf(check: Check<unknown>): string {
  return `${check.id}: ${check.title} (${check.source}; ${check.confidence})`;
}

/**
 * A test named by the id of the check that it makes, with its source. Ids are written out where this is called, so that
 * tests/unit/rules/checks.test.ts can read them in the source and miss none.
 */
export function testCheck<Expected, Input = unknown>(
  id: string,
  make: (check: Check<Expected, Input>) => void | Promise<void>,
): void {
  const check = readCheck<Expected, Input>(id);
  test(titleOf(check), async () => {
    await make(check);
    expect.hasAssertions();
  });
}

/** The same test for several checks of one shape. */
export function testChecks<Expected, Input = unknown>(
  ids: readonly string[],
  make: (check: Check<Expected, Input>) => void | Promise<void>,
): void {
  for (const id of ids) testCheck(id, make);
}

/** A group of tests that make one check. */
export function describeCheck<Expected, Input = unknown>(
  id: string,
  make: (check: Check<Expected, Input>) => void,
): void {
  const check = readCheck<Expected, Input>(id);
  describe(titleOf(check), () => make(check));
}
