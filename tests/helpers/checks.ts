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
