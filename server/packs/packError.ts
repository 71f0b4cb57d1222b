import { SynthError, type SynthErrorCode } from '@/lib/synth';

/** Why a pack was not made; the codes are those of the HTTP API where a person meets them. */
export type PackErrorCode =
  | 'invalid'
  | 'not_supported_yet'
  | 'limit_missed'
  | 'too_large'
  | 'proof_failed'
  | 'cancelled'
  | 'no_room'
  | 'io_failed';

export interface PackIssue {
  /** Which of the two inputs, and the JSON Pointer in it. */
  where: 'document' | 'bench' | 'pack';
  pointer: string;
  message: string;
}

/** An expected refusal inside the pack's steps; makePack turns it into a value, nothing else leaves the room by throwing. */
export class PackError extends Error {
  override name = 'PackError';
  readonly code: PackErrorCode;
  readonly issues: PackIssue[];
  constructor(code: PackErrorCode, message: string, issues: PackIssue[] = []) {
    super(message);
    this.code = code;
    this.issues = issues;
  }
}

export const cancelledMessage = 'Cancelled. Nothing was kept.';

/** Throws when the caller has cancelled; called between blocks, so that a cancel is answered within one block. */
export function throwIfCancelled(signal: AbortSignal | undefined): void {
  if (signal?.aborted) throw new PackError('cancelled', cancelledMessage);
}

/** What lib/synth refuses and no check before it found; the rest of its codes are mistakes of ours. */
const synthCodes: Partial<Record<SynthErrorCode, PackErrorCode>> = {
  bad_content: 'invalid',
  bad_layout: 'invalid',
  marker_outside: 'invalid',
  nothing_painted: 'invalid',
  too_large: 'too_large',
};

const noRoomCodes = new Set(['ENOSPC', 'EDQUOT', 'EFBIG']);

/** The system's own failures in words for a person; paths stay out of them, since a job's reason is shown on a page. */
export function toPackError(error: unknown, signal?: AbortSignal): PackError {
  // whatever ends first when all is given up
  if (signal?.aborted) return new PackError('cancelled', cancelledMessage);
  if (error instanceof PackError) return error;
  const synthCode = error instanceof SynthError ? synthCodes[error.code] : undefined;
  if (synthCode) return new PackError(synthCode, (error as SynthError).message);
  const code = (error as { code?: unknown } | null)?.code;
  if (code === 'ABORT_ERR') return new PackError('cancelled', cancelledMessage);
  if (typeof code === 'string' && noRoomCodes.has(code))
    return new PackError('no_room', 'No room to write. Nothing was kept.');
  if (typeof code === 'string' && /^E[A-Z]+$/.test(code))
    return new PackError('io_failed', `The file could not be written or read (${code}). Nothing was kept.`);
  throw error;
}
