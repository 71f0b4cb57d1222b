import { stat } from 'node:fs/promises';
import path from 'node:path';
import express, { Router, type NextFunction, type Request, type Response } from 'express';
import { DomainError } from '../problem.ts';

const FOREVER = 'public, max-age=31536000, immutable';
/** Names there carry a hash of what is in them: a new content is a new name. */
const HASHED = ['/_expo/static/', '/assets/'];

/** The exported page: compressed beforehand where possible; every unknown address is the page itself, which knows its own routes. */
export function servePage(webDir: string): Router {
  const router = Router();
  router.use(preferBrotli(webDir));
  router.use(
    express.static(webDir, {
      index: false,
      redirect: false,
      setHeaders(response, file) {
        const place = `/${path.relative(webDir, file).split(path.sep).join('/')}`;
        const isHashed = HASHED.some((prefix) => place.startsWith(prefix));
        response.setHeader('Cache-Control', isHashed ? FOREVER : 'no-cache');
      },
    }),
  );
  router.get('/{*path}', (request, response, next) => {
    // A missing file is missing: a page in its place would only fail later and stranger.
    if (path.extname(request.path) !== '') {
      next(new DomainError('not_found'));
      return;
    }
    response.setHeader('Cache-Control', 'no-cache');
    response.sendFile('index.html', { root: webDir }, (error?: Error) => {
      if (error && !response.headersSent) next(error);
    });
  });
  return router;
}

/** Sends `file.br` in the place of `file`, with the type of `file`. */
function preferBrotli(webDir: string) {
  return async (request: Request, response: Response, next: NextFunction): Promise<void> => {
    const isLook = request.method === 'GET' || request.method === 'HEAD';
    const place = decodePath(request.path);
    if (isLook && place && path.extname(place) !== '' && request.acceptsEncodings('br') === 'br') {
      const file = path.join(webDir, `${place}.br`);
      const found = file.startsWith(webDir + path.sep) && (await stat(file).catch(() => null))?.isFile();
      if (found) {
        response.type(path.extname(place));
        response.setHeader('Content-Encoding', 'br');
        response.vary('Accept-Encoding');
        request.url = request.url.replace(request.path, `${request.path}.br`);
      }
    }
    next();
  };
}

function decodePath(urlPath: string): string | null {
  try {
    return decodeURIComponent(urlPath);
  } catch {
    return null;
  }
}
