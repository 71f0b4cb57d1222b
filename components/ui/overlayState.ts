import { createContext, useContext, useSyncExternalStore } from 'react';

let open = 0;
const listeners = new Set<() => void>();
const tell = () => listeners.forEach((notify) => notify());

/** A sheet or a dialog stands over the page from now on, until the answer is called. */
export function overlayOpened(): () => void {
  open++;
  tell();
  return () => {
    open--;
    tell();
  };
}

/** True inside a sheet or a dialog. */
export const InOverlay = createContext(false);

const subscribe = (notify: () => void) => {
  listeners.add(notify);
  return () => void listeners.delete(notify);
};

/** One filled button a screen: while a sheet or dialog is open, the page's own is drawn ruled. */
export function useIsBehindOverlay(): boolean {
  const inside = useContext(InOverlay);
  const behind = useSyncExternalStore(
    subscribe,
    () => open > 0,
    () => false,
  );
  return behind && !inside;
}
