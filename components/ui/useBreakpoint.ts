import { useSyncExternalStore } from 'react';
import { breakpoint } from './tokens';

export type Breakpoint = 'phone' | 'tablet' | 'wide';

const queries =
  typeof window === 'undefined' || !window.matchMedia
    ? null
    : {
        tablet: window.matchMedia(`(min-width: ${breakpoint.tablet}px)`),
        wide: window.matchMedia(`(min-width: ${breakpoint.wide}px)`),
      };

function read(): Breakpoint {
  if (!queries) return 'wide';
  if (queries.wide.matches) return 'wide';
  return queries.tablet.matches ? 'tablet' : 'phone';
}

function subscribe(notify: () => void): () => void {
  queries?.tablet.addEventListener('change', notify);
  queries?.wide.addEventListener('change', notify);
  return () => {
    queries?.tablet.removeEventListener('change', notify);
    queries?.wide.removeEventListener('change', notify);
  };
}

/** The width class of the page; changes only when a border is crossed. */
export function useBreakpoint(): Breakpoint {
  return useSyncExternalStore(subscribe, read, read);
}
