import type { NextFunction, Request, Response } from 'express';
import type { Deps } from '../deps.ts';
import { DomainError } from '../problem.ts';

/** The address that people use: PUBLIC_URL, else what this very request was sent to. */
export function ownOrigin(deps: Deps, request: Request): string {
  return deps.config.publicOrigin ?? `${request.protocol}://${request.host}`;
}

/** A change must say by its Origin that it comes from our own page: a cookie alone would be sent from any. */
export function requireOwnOrigin(deps: Deps) {
  return (request: Request, _response: Response, next: NextFunction): void => {
    const isLook = request.method === 'GET' || request.method === 'HEAD' || request.method === 'OPTIONS';
    if (isLook || request.get('Origin') === ownOrigin(deps, request)) next();
    else next(new DomainError('origin_refused'));
  };
}

const LOCAL_HOST = /^(localhost|127\.0\.0\.1|\[::1\])(:\d+)?$/i;

/** True where the browser itself runs on this machine: its Host is local and no proxy stands between. */
export function isLocalRequest(request: Request): boolean {
  const isForwarded = Object.keys(request.headers).some(
    (name) => name === 'forwarded' || name.startsWith('x-forwarded-'),
  );
  return !isForwarded && LOCAL_HOST.test(request.headers.host ?? '');
}
