import type { Clock } from '../deps.ts';
import { DomainError } from '../problem.ts';

export interface TryLimit {
  /** Counts one try, or refuses with `too_many` and how long to wait. Returns what gives the try back when it succeeded. */
  take(key: string): () => void;
}

const MOST_KEYS = 10_000;

/** A sliding window: at most `most` tries of one key in any `windowMs`. Kept in memory: one process serves one team. */
export function createTryLimit(clock: Clock, most: number, windowMs: number): TryLimit {
  const triesOf = new Map<string, number[]>();

  function recent(key: string, nowMs: number): number[] {
    // A clock that jumped back leaves times in the future: they count from now, so the wait never exceeds one window.
    return (triesOf.get(key) ?? []).map((atMs) => Math.min(atMs, nowMs)).filter((atMs) => atMs > nowMs - windowMs);
  }

  return {
    take(key) {
      const nowMs = clock.nowMs();
      const tries = recent(key, nowMs);
      if (tries.length >= most) {
        const retryAfterSec = Math.ceil(((tries[0] ?? nowMs) + windowMs - nowMs) / 1000);
        const minutes = Math.ceil(retryAfterSec / 60);
        const wait = minutes > 1 ? `${minutes} minutes` : 'a minute';
        throw new DomainError('too_many', { detail: `Too many tries. Try again in ${wait}.`, retryAfterSec });
      }
      triesOf.delete(key); // re-inserted last: the map is in order of use
      triesOf.set(key, [...tries, nowMs]);
      if (triesOf.size > MOST_KEYS) {
        const oldest = triesOf.keys().next().value;
        if (oldest !== undefined) triesOf.delete(oldest);
      }
      return () => {
        const left = triesOf.get(key) ?? [];
        const at = left.lastIndexOf(nowMs);
        if (at >= 0) left.splice(at, 1);
      };
    },
  };
}

/** IPv6 customers own a /64: counting whole addresses would give each of them 2^64 windows. */
export function addressKey(address: string | undefined): string {
  const plain = (address ?? 'unknown').replace(/^::ffff:(?=\d+\.)/, '');
  if (!plain.includes(':')) return plain;
  const [head = '', tail] = plain.split('::');
  const groups = head.split(':').filter(Boolean);
  if (tail !== undefined) {
    const end = tail.split(':').filter(Boolean);
    while (groups.length + end.length < 8) groups.push('0');
    groups.push(...end);
  }
  return `${groups
    .slice(0, 4)
    .map((group) => group.replace(/^0+(?=.)/, '').toLowerCase())
    .join(':')}::/64`;
}
