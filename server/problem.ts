import type { Issue, ProblemCode } from '@/lib/contracts/problem';

export interface ProblemDetails {
  /** A whole sentence for the person who asked. */
  detail?: string;
  issues?: Issue[];
  moreIssues?: number;
  /** Plain values a client acts on, e.g. the newer revision's id. */
  facts?: Record<string, unknown>;
  /** Seconds after which a new try makes sense; becomes Retry-After. */
  retryAfterSec?: number;
}

/** An expected refusal. Services throw it and know no HTTP; one middleware turns it into application/problem+json. */
export class DomainError extends Error {
  readonly code: ProblemCode;
  readonly details: ProblemDetails;
  constructor(code: ProblemCode, details: ProblemDetails | string = {}) {
    const given = typeof details === 'string' ? { detail: details } : details;
    super(given.detail ?? code);
    this.name = 'DomainError';
    this.code = code;
    this.details = given;
  }
}

/** One wrong field, where a service finds what no schema can. */
export function invalidField(pointer: string, message: string, code = 'invalid'): DomainError {
  return new DomainError('invalid', { detail: message, issues: [{ pointer, message, code }] });
}
