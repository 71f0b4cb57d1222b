import { randomBytes } from 'node:crypto';
import type { NextFunction, Request, Response } from 'express';
import type { Logger } from 'pino';
import type { Deps } from '../deps.ts';

interface RequestContext {
  requestId: string;
  log: Logger;
}

const contexts = new WeakMap<Request, RequestContext>();

/** The id that stands in the answer's header, in a problem's `instance` and in every log line of the request. */
export function requestContext(request: Request): RequestContext {
  const context = contexts.get(request);
  if (!context) throw new Error('requestContext is asked before the middleware ran');
  return context;
}

/** Gives each request its id (never the client's) and writes one log line when it ends. No header, body or query is logged: they may hold secrets. */
export function nameRequests(deps: Deps) {
  return (request: Request, response: Response, next: NextFunction): void => {
    const requestId = randomBytes(8).toString('hex');
    const log = deps.log.child({ requestId });
    contexts.set(request, { requestId, log });
    response.setHeader('X-Request-Id', requestId);
    const startedMs = deps.clock.nowMs();
    let isLogged = false;
    const write = (isCut: boolean) => {
      if (isLogged) return;
      isLogged = true;
      const line = {
        method: request.method,
        path: request.originalUrl.split('?', 1)[0],
        status: response.statusCode,
        tookMs: deps.clock.nowMs() - startedMs,
        ...(isCut && { isCut }),
      };
      log.info(line, 'request');
    };
    response.on('finish', () => write(false));
    response.on('close', () => write(!response.writableFinished));
    next();
  };
}
