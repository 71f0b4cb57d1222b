import { editorCommands } from '@/lib/editor/commands/all';
import { createRegistry, shortcutOf } from '@/lib/editor/commands/registry';
import { spokenCell } from '@/lib/editor/spoken';
import { headlessEditor } from '../../../helpers/headlessEditor';

const press = { ctrlKey: false, metaKey: false, shiftKey: false, altKey: false };

describe('commands and keys', () => {
  it('refuses two commands on one shortcut or with one name, at start', () => {
    const command = { id: 'a', label: 'A', shortcut: 'B', isEnabled: () => true, plan: () => null };
    expect(() => createRegistry([command, { ...command, id: 'b' }])).toThrow(/a and b share the shortcut B/);
    expect(() => createRegistry([command, { ...command, shortcut: 'C' }])).toThrow(/two commands are named a/);
    expect(() => createRegistry([command, { ...command, id: 'b', shortcut: 'D', otherShortcuts: ['B'] }])).toThrow();
  });

  it('spells key presses as the registry does', () => {
    expect(shortcutOf({ ...press, key: 'z', ctrlKey: true })).toBe('Ctrl+Z');
    expect(shortcutOf({ ...press, key: 'Z', metaKey: true, shiftKey: true })).toBe('Ctrl+Shift+Z');
    expect(shortcutOf({ ...press, key: ' ' })).toBe('Space');
    expect(shortcutOf({ ...press, key: '+', shiftKey: true })).toBe('+');
    expect(shortcutOf({ ...press, key: '?', shiftKey: true })).toBe('?');
    expect(shortcutOf({ ...press, key: 'ArrowLeft', shiftKey: true })).toBe('Shift+ArrowLeft');
  });

  it('draws with the keyboard alone', () => {
    const it = headlessEditor();
    it.key('B').key('3');
    expect(it.editor.session.getState()).toMatchObject({ tool: 'brush', ink: 2 });
    it.key('Space');
    expect(it.row(0)).toBe(`${'.'.repeat(16)}2${'.'.repeat(15)}`);
    it.key('ArrowDown').key('ArrowRight').key('+').key('+').key('Space');
    expect(it.row(1)).toBe(`${'.'.repeat(16)}222${'.'.repeat(13)}`);
    it.key('R').key('Shift+ArrowDown').key('Shift+ArrowRight').key('Space');
    expect(it.row(2)).toBe(`${'.'.repeat(17)}22${'.'.repeat(13)}`);
    it.key('Delete');
    expect(it.row(2)).toBe('.'.repeat(32));
    it.key('Ctrl+Z').key('Ctrl+Z').key('Ctrl+Z').key('Ctrl+Z');
    expect(it.row(0)).toBe('.'.repeat(32));
    it.key('Ctrl+Shift+Z');
    expect(it.row(0)[16]).toBe('2');
    expect(it.key('Escape').editor.session.getState().selection).toBeNull();
  });

  it('shrinks a selection through its corner and grows it again', () => {
    const it = headlessEditor();
    it.key('Shift+ArrowRight').key('Shift+ArrowRight').key('Shift+ArrowLeft');
    expect(it.editor.session.getState().selection).toEqual({
      positionFrom: 16,
      positionTo: 17,
      symbolFrom: 0,
      symbolTo: 0,
    });
    it.key('Shift+ArrowLeft').key('Shift+ArrowLeft');
    expect(it.editor.session.getState().selection).toMatchObject({ positionFrom: 15, positionTo: 16 });
  });

  it('turns the arrows with the axes', () => {
    const it = headlessEditor();
    it.key('X').key('ArrowUp').key('ArrowRight');
    expect(it.editor.session.getState().cursor).toEqual({ position: 17, symbol: 1 });
  });

  it('paints the comb of the blanks, and says the cell under the cursor', () => {
    const it = headlessEditor();
    it.tool('comb', 3).editor.set({
      comb: {
        everySubcarrier: 12,
        subcarrierFrom: -12,
        subcarrierTo: 12,
        everySymbol: 3,
        symbolFrom: 2,
        symbolTo: 13,
        shiftPerPass: 6,
      },
      cursor: { position: 4, symbol: 2 },
    });
    editorCommands.run(it.editor, 'paint.sentence');
    expect(it.row(2)).toBe('....3...........3...........3...');
    expect(it.row(5)).toBe('..........3...........3.........');
    const spoken = () => spokenCell(it.editor.document, it.editor.session.getState().cursor);
    expect(spoken()).toBe('Subcarrier \u221212, symbol 2, pilot, 3 dB');
    it.key('ArrowRight');
    expect(spoken()).toBe('Subcarrier \u221211, symbol 2, null');
    it.tool('brush', 2).key('Space');
    expect(spoken()).toBe('Subcarrier \u221211, symbol 2, 16-QAM, 0 dB');
  });

  it('does nothing where a command is not enabled', () => {
    const it = headlessEditor();
    expect(editorCommands.run(it.editor, 'history.undo')).toBeNull();
    expect(editorCommands.run(it.editor, 'ink.9')).toBeNull();
  });
});
