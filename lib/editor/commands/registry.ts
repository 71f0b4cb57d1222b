import type { Editor } from '../store';
import { performOutcome } from './outcome';
import type { Outcome } from './outcome';

/** One act, named once: toolbar, menus, keys and tests take it from here. */
export interface Command {
  id: string;
  /** What the button says. */
  label: string;
  /** "B", "Ctrl+Shift+Z", "Shift+ArrowLeft", "Space": see shortcutOf. Further keys for the same act stand beside it. */
  shortcut?: string;
  otherShortcuts?: readonly string[];
  isEnabled(editor: Editor): boolean;
  /** What the act would do. Reads, writes nothing. */
  plan(editor: Editor): Outcome;
}

export interface Registry {
  readonly commands: readonly Command[];
  find(id: string): Command;
  byShortcut(shortcut: string): Command | null;
  /** Plans and does a command; a disabled one does nothing (null). Returns what was planned, for questions and screen acts. */
  run(editor: Editor, id: string): Outcome;
}

/** Makes the registry; two commands with one id or on one shortcut are a mistake of the program and throw. */
export function createRegistry(commands: readonly Command[]): Registry {
  const ids = new Map<string, Command>();
  const shortcuts = new Map<string, Command>();
  for (const command of commands) {
    if (ids.has(command.id)) throw new Error(`two commands are named ${command.id}`);
    ids.set(command.id, command);
    for (const shortcut of [command.shortcut, ...(command.otherShortcuts ?? [])]) {
      if (shortcut === undefined) continue;
      const other = shortcuts.get(shortcut);
      if (other) throw new Error(`${other.id} and ${command.id} share the shortcut ${shortcut}`);
      shortcuts.set(shortcut, command);
    }
  }
  const find = (id: string) => {
    const command = ids.get(id);
    if (!command) throw new Error(`no command is named ${id}`);
    return command;
  };
  return {
    commands,
    find,
    byShortcut: (shortcut) => shortcuts.get(shortcut) ?? null,
    run(editor, id) {
      const command = find(id);
      if (!command.isEnabled(editor)) return null;
      return performOutcome(editor, command.plan(editor));
    },
  };
}

/** The part of a keyboard event that decides a shortcut. */
export interface KeyPress {
  key: string;
  ctrlKey: boolean;
  metaKey: boolean;
  shiftKey: boolean;
  altKey: boolean;
}

/** The spelling of a key press in the registry: letters in capitals, Ctrl for Command too, Shift named for letters and arrows alone. */
export function shortcutOf(press: KeyPress): string {
  const isLetter = /^[a-z]$/i.test(press.key);
  const key = press.key === ' ' ? 'Space' : isLetter ? press.key.toUpperCase() : press.key;
  const namesShift = press.shiftKey && (isLetter || key.length > 1);
  return [
    ...(press.ctrlKey || press.metaKey ? ['Ctrl'] : []),
    ...(press.altKey ? ['Alt'] : []),
    ...(namesShift ? ['Shift'] : []),
    key,
  ].join('+');
}
