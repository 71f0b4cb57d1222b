import { useSyncExternalStore } from 'react';
import { themes } from './tokens';

/** Paper and Night are the same drawing; `system` follows the device. */
export type ThemeChoice = 'paper' | 'night' | 'system';
export type ThemeName = 'paper' | 'night';
export type ThemeColors = (typeof themes)[ThemeName];

type VarsOf<T> = { readonly [K in keyof T]: T[K] extends string ? string : VarsOf<T[K]> };

const kebab = (path: string[]) => '--' + path.join('-');

function varsOf(tree: object, path: string[] = []): unknown {
  return Object.fromEntries(
    Object.entries(tree).map(([key, value]) => [
      key,
      typeof value === 'string' ? `var(${kebab([...path, key])})` : varsOf(value as object, [...path, key]),
    ]),
  );
}

/**
 * Every colour as a reference to a custom property of the page, so that a change of theme repaints without a render.
 * What draws on a canvas needs the values themselves: `useThemeColors`.
 */
export const color = varsOf(themes.paper) as VarsOf<ThemeColors>;

function declarations(tree: object, path: string[] = []): string {
  return Object.entries(tree)
    .map(([key, value]) =>
      typeof value === 'string' ? `${kebab([...path, key])}:${value};` : declarations(value as object, [...path, key]),
    )
    .join('');
}

const pageRules = `
*{-webkit-tap-highlight-color:transparent}
html,body{background:var(--surface-desk);color-scheme:light}
html[data-theme=night]{color-scheme:dark}
:focus-visible{outline:2px solid var(--focus-ring)!important;outline-offset:2px}
[role=radio]:focus-visible,[role=button]:focus-visible{z-index:1}
::selection{background:var(--surface-selected);color:var(--ink-onSelected)}
@media (prefers-reduced-motion:reduce){*{animation-duration:0s!important;transition-duration:0s!important}}
`;

/** The style sheet of both themes, put once into the page's head. */
export function installThemeStyles(): void {
  if (document.getElementById('combwright-theme')) return;
  const style = document.createElement('style');
  style.id = 'combwright-theme';
  style.textContent = `:root{${declarations(themes.paper)}}:root[data-theme=night]{${declarations(themes.night)}}${pageRules}`;
  document.head.appendChild(style);
  apply();
}

const storageKey = 'combwright.theme';
const listeners = new Set<() => void>();
let choice: ThemeChoice = readChoice();
const dark = typeof window === 'undefined' ? null : (window.matchMedia?.('(prefers-color-scheme: dark)') ?? null);
dark?.addEventListener('change', () => {
  apply();
  listeners.forEach((notify) => notify());
});

function readChoice(): ThemeChoice {
  try {
    const stored = globalThis.localStorage?.getItem(storageKey);
    return stored === 'paper' || stored === 'night' ? stored : 'system';
  } catch {
    return 'system'; // storage may be blocked
  }
}

function current(): ThemeName {
  if (choice !== 'system') return choice;
  return dark?.matches ? 'night' : 'paper';
}

function apply(): void {
  document.documentElement.dataset.theme = current();
}

export function chooseTheme(next: ThemeChoice): void {
  choice = next;
  try {
    if (next === 'system') localStorage.removeItem(storageKey);
    else localStorage.setItem(storageKey, next);
  } catch {
    // the choice then lasts until the page is left
  }
  apply();
  listeners.forEach((notify) => notify());
}

const subscribe = (notify: () => void) => {
  listeners.add(notify);
  return () => void listeners.delete(notify);
};

/** The theme in force and the person's choice. */
export function useTheme(): { name: ThemeName; choice: ThemeChoice } {
  const name = useSyncExternalStore(subscribe, current, current);
  const chosen = useSyncExternalStore(
    subscribe,
    () => choice,
    () => choice,
  );
  return { name, choice: chosen };
}

/** The values of the theme in force, for code that draws on a canvas. */
export function useThemeColors(): ThemeColors {
  return themes[useTheme().name];
}
