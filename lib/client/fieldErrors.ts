import type { ProblemError } from './useApi';

/** The first message for each top-level field of a refused body: `/name` → `{ name: 'must not be empty' }`. */
export function fieldErrors(error: ProblemError | null): Record<string, string> {
  const found: Record<string, string> = {};
  for (const issue of error?.problem?.issues ?? []) {
    const field = issue.pointer.split('/')[1];
    if (field && !(field in found)) found[field] = issue.message;
  }
  return found;
}
