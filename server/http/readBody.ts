import { createGunzip } from 'node:zlib';
import type { Request } from 'express';
import { DEFAULT_BODY_BYTES, type Endpoint } from '@/lib/contracts/endpoint';
import type { Issue } from '@/lib/contracts/problem';
import { DomainError } from '../problem.ts';
import type { LargeBodyCheck } from './bodyWorker.ts';
import { checkBodyBytes } from './checkJson.ts';

/** Above this a body is parsed and checked in a thread. */
const THREAD_FROM_BYTES = 256 * 1024;

function tooLarge(most: number): DomainError {
  const size = most >= 2 ** 20 ? `${most / 2 ** 20} MiB` : `${most / 1024} KiB`;
  return new DomainError('too_large', `A body here has at most ${size}.`);
}

/** Collects the body, inflated; stops reading where it grows past `most`, so that a small gzip of zeros costs no memory. */
async function readBytes(request: Request, most: number): Promise<Uint8Array<ArrayBuffer>> {
  const encoding = (request.headers['content-encoding'] ?? 'identity').toLowerCase();
  if (encoding !== 'identity' && encoding !== 'gzip')
    throw new DomainError('wrong_type', 'The body may be gzip or plain.');
  if (Number(request.headers['content-length'] ?? 0) > most) throw tooLarge(most);
  const source = encoding === 'gzip' ? request.pipe(createGunzip()) : request;
  const chunks: Buffer[] = [];
  let count = 0;
  try {
    await new Promise<void>((resolve, reject) => {
      const cut = () => reject(new DomainError('malformed', 'The body ended early.'));
      source.on('data', (chunk: Buffer) => {
        count += chunk.length;
        if (count > most) reject(tooLarge(most));
        else chunks.push(chunk);
      });
      source.on('end', resolve);
      source.on('error', () => reject(new DomainError('malformed', 'The body is not what its encoding says.')));
      request.on('aborted', cut);
      request.on('error', cut);
    });
  } finally {
    if (source !== request) {
      request.unpipe();
      source.removeAllListeners('data');
      source.destroy();
    }
    request.removeAllListeners('data');
  }
  const whole = new Uint8Array(new ArrayBuffer(count));
  let at = 0;
  for (const chunk of chunks) {
    whole.set(chunk, at);
    at += chunk.length;
  }
  return whole;
}

function unreadError(issue: Issue): DomainError {
  const place = issue.pointer === '' ? 'The body' : `The body's ${issue.pointer}`;
  const code = issue.code === 'too_large' ? 'too_large' : 'malformed';
  return new DomainError(code, { detail: `${place} ${issue.message}.`, issues: [issue] });
}

/** Reads, parses and checks the body by the endpoint's contract; each refusal is a domain error. */
export async function readBody(request: Request, endpoint: Endpoint, checkLarge: LargeBodyCheck): Promise<unknown> {
  if (!endpoint.body) return undefined;
  if (!request.is('application/json')) throw new DomainError('wrong_type', 'The body must be application/json.');
  const bytes = await readBytes(request, endpoint.bodyBytesMost ?? DEFAULT_BODY_BYTES);
  const checked =
    bytes.length > THREAD_FROM_BYTES ? await checkLarge(endpoint.name, bytes) : checkBodyBytes(endpoint, bytes);
  if (checked.ok) return checked.value;
  if ('unread' in checked) throw unreadError(checked.unread);
  const code = checked.issues.some((issue) => issue.code === 'not_supported_yet') ? 'not_supported_yet' : 'invalid';
  throw new DomainError(code, { issues: checked.issues, moreIssues: checked.more });
}
