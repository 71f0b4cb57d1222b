import type { Problem } from '@/lib/contracts/problem';

/** The id by which the server's log names a request: "4f1c…". */
export const requestOf = (problem: Problem) => problem.instance.replace('urn:combwright:request:', '');

/** A refusal in its own words; where the server itself failed, what it answered and under which number its log tells more. */
export function problemWords(problem: Problem): string {
  if (problem.code === 'internal') return `The server answered ${problem.status}. Request ${requestOf(problem)}.`;
  return problem.detail || problem.title;
}
