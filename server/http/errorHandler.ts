import type { NextFunction, Request, Response } from 'express';
import { DomainError } from '../problem.ts';
import { requestContext } from './requestContext.ts';
import { asDomainError, toProblem } from './toProblem.ts';

/** The one place where an error becomes an answer. */
export function answerErrors(error: unknown, request: Request, response: Response, _next: NextFunction): void {
  const { log, requestId } = requestContext(request);
  const known = asDomainError(error);
  if (!known) log.error({ err: error }, 'request failed');
  if (response.headersSent) {
    // A file broke half-way: a clean end would pass for the whole.
    response.destroy();
    return;
  }
  const problem = toProblem(known ?? new DomainError('internal'), requestId);
  const wait = known?.details.retryAfterSec;
  if (wait !== undefined) response.setHeader('Retry-After', String(wait));
  response.removeHeader('ETag');
  response.status(problem.status).setHeader('Cache-Control', 'no-store');
  response.type('application/problem+json').send(JSON.stringify(problem));
}
