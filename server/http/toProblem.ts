import { StoreGoneError } from '@/db/openDatabase';
import { problems, type Problem } from '@/lib/contracts/problem';
import { DomainError } from '../problem.ts';

/** Errors of Express and its parsers carry a status and say by `expose` whether it is the client's fault. */
function clientStatus(error: unknown): number | null {
  if (!(error instanceof Error) || !('status' in error) || typeof error.status !== 'number') return null;
  return error.status >= 400 && error.status < 500 ? error.status : null;
}

/** Any error as a domain error; null where it is ours to repair and its words stay in the log. */
export function asDomainError(error: unknown): DomainError | null {
  if (error instanceof DomainError) return error;
  if (error instanceof StoreGoneError)
    return new DomainError(
      'stopping',
      'The server lost its database file and stops. What you did not save stays here.',
    );
  if (isDiskFull(error)) return new DomainError('no_room', 'The disk of the server is full. Nothing was changed.');
  const status = clientStatus(error);
  if (status === 413) return new DomainError('too_large');
  if (status === 415) return new DomainError('wrong_type');
  if (status === 404) return new DomainError('not_found');
  if (status !== null) return new DomainError('malformed');
  return null;
}

function isDiskFull(error: unknown): boolean {
  return error instanceof Error && 'code' in error && (error.code === 'SQLITE_FULL' || error.code === 'ENOSPC');
}

export function toProblem(error: DomainError, requestId: string): Problem {
  const { status, title } = problems[error.code];
  const { detail, issues, moreIssues, facts } = error.details;
  return {
    type: `urn:combwright:problem:${error.code}`,
    title,
    status,
    detail: detail ?? title,
    instance: `urn:combwright:request:${requestId}`,
    code: error.code,
    ...(issues && { issues }),
    ...(moreIssues && { moreIssues }),
    ...(facts && { facts }),
  };
}
