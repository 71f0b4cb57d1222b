import { useEffect } from 'react';
import { readPreferences } from '@/components/ui/preferences';
import { editorCommands } from '@/lib/editor/commands/all';
import { shortcutOf } from '@/lib/editor/commands/registry';

/** Parts that F6 goes round: sheet line, grid, views, trough. */
const PARTS = ['sheet-line', 'grid', 'views', 'trough'] as const;

const FOCUSABLE = 'a[href],button,[tabindex]:not([tabindex="-1"]),input,select,textarea';

/** Moves the focus to the next part of the table that is there. */
export function focusNextPart(): void {
  const nodes = PARTS.map((id) => document.getElementById(id)).filter((node) => node !== null);
  if (nodes.length === 0) return;
  const active = document.activeElement;
  const at = nodes.findIndex((node) => node.contains(active));
  const next = nodes[(at + 1) % nodes.length]!;
  const target = next.matches('[tabindex="0"]') ? next : (next.querySelector<HTMLElement>(FOCUSABLE) ?? next);
  target.focus();
}

/** Text is being typed, or a choice of words wants the keys itself. */
function takesKeys(target: EventTarget | null): boolean {
  return target instanceof HTMLElement && /^(INPUT|TEXTAREA|SELECT)$/.test(target.tagName);
}

/** Letters, digits, Space and arrows belong to the table only while grid, tray or tools have the focus. */
function isInTable(target: EventTarget | null): boolean {
  if (!(target instanceof HTMLElement)) return false;
  return target === document.body || target.closest('#grid, #trough, #table') !== null;
}

/**
 * The table's keys, taken from the one registry. `run` gets the id of a command; it returns false where the key should go on to
 * the browser.
 */
export function useTableKeys(run: (id: string) => boolean, isOn: boolean): void {
  useEffect(() => {
    if (!isOn) return;
    const onKey = (event: KeyboardEvent) => {
      if (event.defaultPrevented || event.isComposing) return;
      const shortcut = shortcutOf(event);
      const command = editorCommands.byShortcut(shortcut);
      if (!command) return;
      const everywhere = event.key === 'F6' || (shortcut === 'Ctrl+Enter' && !document.querySelector('[role=dialog]'));
      if (!everywhere) {
        if (takesKeys(event.target)) return;
        if (shortcut.length === 1 && !readPreferences().singleKeys) return;
        if (!isInTable(event.target)) return;
        const isPress = event.key === ' ' || event.key === 'Enter';
        const onControl =
          event.target instanceof HTMLElement && event.target.matches('[role=button],[role=radio],button,a');
        // A button that is focused takes Space itself, and a group of words its arrows.
        if (onControl && (isPress || event.key.startsWith('Arrow'))) return;
      }
      if (run(command.id)) event.preventDefault();
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  }, [run, isOn]);
}
