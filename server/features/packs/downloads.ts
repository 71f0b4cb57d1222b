import type { Request, Response } from 'express';
import type { Events } from '../../events.ts';
import { DomainError } from '../../problem.ts';
import type { PackFile } from './service.ts';

export interface Downloads {
  /** Sends the stored file: whole, a range, or its head alone. Resolves with true when bytes from its beginning went out, whole or not. */
  send(request: Request, response: Response, pack: PackFile): Promise<boolean>;
}

/** Running downloads are known by edition, so that a withdrawal cuts them: half a file must not pass for a vector. */
export function createDownloads(events: Events): Downloads {
  const running = new Map<string, Set<Response>>();

  events.editionWithdrawn.listen(({ editionId }) => {
    for (const response of running.get(editionId) ?? []) response.destroy();
  });

  function remember(editionId: string | null, response: Response): () => void {
    if (editionId === null) return () => undefined;
    const responses = running.get(editionId) ?? new Set();
    running.set(editionId, responses.add(response));
    return () => {
      responses.delete(response);
      if (responses.size === 0) running.delete(editionId);
    };
  }

  return {
    send(request, response, pack) {
      response.setHeader('Content-Type', 'application/zip');
      response.setHeader('Content-Disposition', `attachment; filename="${pack.fileName}"`);
      response.setHeader('Cache-Control', 'private, no-cache');
      response.setHeader('X-Content-Type-Options', 'nosniff');
      response.setHeader('ETag', `"${pack.fileSha256}"`);
      // RFC 9530: of the whole file, also beside a part of it.
      const digest = Buffer.from(pack.fileSha256, 'hex').toString('base64');
      response.setHeader('Repr-Digest', `sha-256=:${digest}:`);
      const forget = remember(pack.editionId, response);
      return new Promise<boolean>((resolve, reject) => {
        const options = { cacheControl: false, lastModified: false, acceptRanges: true, dotfiles: 'allow' } as const;
        response.sendFile(pack.file, options, (error?: Error) => {
          forget();
          if (!error || response.headersSent) resolve(request.method === 'GET' && isFromBeginning(response));
          else reject(refusalOf(error, response));
        });
      });
    },
  };
}

/** A download in parts is one use: only its first part counts. */
function isFromBeginning(response: Response): boolean {
  if (response.statusCode === 200) return true;
  return response.statusCode === 206 && String(response.getHeader('Content-Range')).startsWith('bytes 0-');
}

function refusalOf(error: Error, response: Response): Error {
  for (const name of ['Content-Disposition', 'ETag', 'Repr-Digest']) response.removeHeader(name);
  if ('status' in error && error.status === 416)
    return new DomainError('bad_range', 'The range lies outside the file.');
  return error;
}
