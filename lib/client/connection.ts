import { useSyncExternalStore } from 'react';
import type { QueryClient } from '@tanstack/react-query';

/** The last answer of the server, or that none came. The page goes on to be read; a notice says since when it is old. */
let lost = false;
const listeners = new Set<() => void>();

export function noteAnswer(came: boolean): void {
  if (lost === !came) return;
  lost = !came;
  listeners.forEach((notify) => notify());
}

if (typeof window !== 'undefined') window.addEventListener('offline', () => noteAnswer(false));

const subscribe = (notify: () => void) => {
  listeners.add(notify);
  return () => void listeners.delete(notify);
};

/** True from the first request that got no answer to the next one that did. */
export function useConnectionLost(): boolean {
  return useSyncExternalStore(
    subscribe,
    () => lost,
    () => false,
  );
}

/** When the oldest part of what the page shows was loaded; null where nothing was. `apart` names what the page does not show. */
export function shownSinceMs(queries: QueryClient, apart: string): number | null {
  const times = queries
    .getQueryCache()
    .findAll({ type: 'active' })
    .filter((query) => query.queryKey[0] !== apart && query.state.dataUpdatedAt > 0)
    .map((query) => query.state.dataUpdatedAt);
  return times.length === 0 ? null : Math.min(...times);
}
