import type { PackIssue } from '../packs/packError.ts';

/** What a command ends with. Lines go to standard output, errors to standard error; with --json the object replaces the lines. */
export interface Outcome {
  exitCode: 0 | 1 | 2;
  lines: string[];
  errors: string[];
  json: Record<string, unknown>;
}

export function done(lines: string[], json: Record<string, unknown>): Outcome {
  return { exitCode: 0, lines, errors: [], json: { ok: true, ...json } };
}

/** Refused or failed. `more` counts the issues that a long list left out. */
export function refused(code: string, message: string, issues: PackIssue[] = [], more = 0): Outcome {
  const errors = [message, ...issues.map((issue) => `  ${issue.where} ${issue.pointer || '/'}: ${issue.message}`)];
  if (more > 0) errors.push(`  and ${more} more`);
  return { exitCode: 1, lines: [], errors, json: { ok: false, code, message, issues, more } };
}

export function usage(message: string): Outcome {
  const errors = [`${message}.`, 'See combwright --help.'];
  return { exitCode: 2, lines: [], errors, json: { ok: false, code: 'usage', message, issues: [], more: 0 } };
}
