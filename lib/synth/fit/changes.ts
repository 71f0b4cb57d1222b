import { demand } from '../errors';
import type { PlainChange } from './types';

/** A copy of `value` with each change's `after` put at its pointer (RFC 6901); what is not on a way to a change is shared. */
export function applyChanges<T>(value: T, changes: readonly PlainChange[]): T {
  return changes.reduce((whole: unknown, change) => put(whole, pathOf(change.pointer), change.after), value) as T;
}

function pathOf(pointer: string): string[] {
  return pointer
    .split('/')
    .slice(1)
    .map((part) => part.replace(/~1/g, '/').replace(/~0/g, '~'));
}

function put(value: unknown, path: readonly string[], after: unknown): unknown {
  const [key, ...rest] = path;
  if (key === undefined) return after;
  demand(typeof value === 'object' && value !== null && key in value, 'bad_content', `Nothing stands at "${key}".`);
  if (Array.isArray(value)) {
    const copy: unknown[] = value.slice();
    copy[Number(key)] = put(copy[Number(key)], rest, after);
    return copy;
  }
  const record = value as Record<string, unknown>;
  return { ...record, [key]: put(record[key], rest, after) };
}
