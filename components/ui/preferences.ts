import { useSyncExternalStore } from 'react';

/** What a person likes on this device; the theme stands beside it in theme.ts. */
export interface Preferences {
  /** The drawing table opens with symbols to the right. */
  axesTurned: boolean;
  /** On a touch screen one finger moves the drawing, in place of painting. */
  oneFingerMoves: boolean;
  /** Single letters, digits and signs act as keys; off for who dictates or has trouble with them. */
  singleKeys: boolean;
}

const storageKey = 'combwright.preferences';
const usual: Preferences = { axesTurned: false, oneFingerMoves: false, singleKeys: true };
const listeners = new Set<() => void>();
let held: Preferences | null = null;

export function readPreferences(): Preferences {
  if (held) return held;
  held = usual;
  try {
    const stored: unknown = JSON.parse(globalThis.localStorage?.getItem(storageKey) ?? 'null');
    if (typeof stored === 'object' && stored !== null)
      for (const key of Object.keys(usual) as (keyof Preferences)[]) {
        const value = (stored as Record<string, unknown>)[key];
        if (typeof value === 'boolean') held = { ...held, [key]: value };
      }
  } catch {
    // storage may be blocked, or hold something else
  }
  return held;
}

export function setPreferences(change: Partial<Preferences>): void {
  held = { ...readPreferences(), ...change };
  try {
    localStorage.setItem(storageKey, JSON.stringify(held));
  } catch {
    // it then lasts until the page is left
  }
  listeners.forEach((notify) => notify());
}

const subscribe = (notify: () => void) => {
  listeners.add(notify);
  return () => void listeners.delete(notify);
};

export function usePreferences(): Preferences {
  return useSyncExternalStore(subscribe, readPreferences, readPreferences);
}
