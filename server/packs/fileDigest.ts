import type { WorkPool } from './pool/workPool.ts';
import type { BytePlace } from './pool/workTasks.ts';

/** What a thread takes at once, so that a cancel is heard between two. */
const pieceBytes = 1 << 24;

/**
 * The digest of an open file's bytes, beside the pool. A digest goes on under its name until `isLast`, and is empty before.
 * `check` throws to give it up.
 */
export async function digestPlace(
  pool: WorkPool,
  name: string,
  algorithm: 'sha256' | 'sha512',
  place: BytePlace,
  check: () => void,
  isLast = true,
): Promise<string> {
  for (let done = 0; ;) {
    check();
    const bytes = Math.min(pieceBytes, place.bytes - done);
    const piece = { ...place, offsetBytes: place.offsetBytes + done, bytes };
    done += bytes;
    const isEnd = done === place.bytes;
    const digest = await pool.runAside<'digest'>({
      kind: 'digest',
      name,
      algorithm,
      place: piece,
      isLast: isLast && isEnd,
    });
    if (isEnd) return digest;
  }
}
