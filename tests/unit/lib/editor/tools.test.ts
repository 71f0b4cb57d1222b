import { headlessEditor, testDocument, testTray } from '../../../helpers/headlessEditor';

const empty = '.'.repeat(32);

describe('brush', () => {
  it('paints the cells between two places of the pointer, without holes', () => {
    const it = headlessEditor().tool('brush', 1);
    it.pointerDown(3, 4).pointerMove(9, 4).pointerUp();
    expect(it.row(4)).toBe('...1111111......................');
    expect(it.editor.session.getState().undoLabel).toBe('Paint 7 cells');
    it.pointerDown(0, 0).pointerMove(13, 13).pointerUp();
    for (let l = 0; l < 14; l++) expect(it.row(l)[l]).toBe('1');
  });

  it('is one step, however many moves it had', () => {
    const it = headlessEditor().tool('brush', 2);
    const before = it.bytes();
    it.pointerDown(1, 1).pointerMove(2, 1).pointerMove(3, 2).pointerMove(9, 3).pointerUp();
    expect(it.editor.undo()).toBe(true);
    expect(it.bytes()).toBe(before);
    expect(it.editor.undo()).toBe(false);
    expect(it.editor.redo()).toBe(true);
    expect(it.row(3)[9]).toBe('2');
  });

  it('has a size in subcarriers and symbols, and is cut at the edges', () => {
    const it = headlessEditor().tool('brush', 1);
    it.editor.set({ brush: { subcarriers: 3, symbols: 2 } });
    it.pointerDown(0, 13).pointerUp();
    expect(it.row(13)).toBe(`11${'.'.repeat(30)}`);
    expect(it.row(12)).toBe(empty);
    it.pointerDown(31, 0).pointerUp();
    expect(it.row(0)).toBe(`${'.'.repeat(30)}11`);
    expect(it.row(1)).toBe(`${'.'.repeat(30)}11`);
  });

  it('is taken back whole by cancel, and by a second finger', () => {
    const it = headlessEditor().tool('brush', 1);
    const before = it.bytes();
    it.pointerDown(3, 4).pointerMove(9, 4);
    expect(it.row(4)).not.toBe(empty);
    expect(it.machine.cancel()).toBe(true);
    expect(it.bytes()).toBe(before);
    it.pointerUp();
    it.pointerDown(3, 4, { kind: 'touch' }).pointerMove(9, 4, { kind: 'touch' });
    it.pointerDown(20, 4, { kind: 'touch', pointerId: 2 });
    expect(it.machine.phase()).toBe('pinching');
    expect(it.bytes()).toBe(before);
    it.pointerUp({ pointerId: 2 });
    it.pointerMove(12, 5, { kind: 'touch' });
    it.pointerUp();
    expect(it.bytes()).toBe(before);
    expect(it.editor.session.getState().undoLabel).toBeNull();
    expect(it.machine.phase()).toBe('idle');
  });

  it('is what undo takes back while it lasts, not the step before', () => {
    const it = headlessEditor().tool('brush', 1);
    it.pointerDown(3, 4).pointerUp();
    it.pointerDown(3, 8).pointerMove(9, 8).key('Ctrl+Z').pointerMove(12, 8).pointerUp();
    expect(it.row(4)[3]).toBe('1');
    expect(it.row(8)).toBe(empty);
    expect(it.editor.session.getState().undoLabel).toBe('Paint 1 cell');
  });

  it('refuses a stroke that a pilot cannot hold, with its name and the first place', () => {
    const tray = testTray.map((ink) =>
      ink.role === 'pilot'
        ? {
            ...ink,
            value: {
              factors: [{ sequence: { kind: 'alternating' as const }, counter: 'subcarrier' as const, start: -6 }],
            },
          }
        : ink,
    );
    const it = headlessEditor(testDocument({ tray })).tool('brush', 3);
    const before = it.bytes();
    it.pointerDown(8, 2).pointerMove(4, 2).pointerUp();
    expect(it.bytes()).toBe(before);
    const { notice } = it.editor.session.getState();
    expect(notice).toContain('“Pilot”');
    expect(notice).toContain('subcarrier \u221210');
    it.pointerDown(8, 2).pointerMove(6, 2).pointerUp();
    expect(it.row(2)).toBe('......333.......................');
  });
});

describe('rectangle and comb', () => {
  it('fills the dragged block alone, whatever way the pointer went', () => {
    const it = headlessEditor().tool('rectangle', 2);
    it.pointerDown(10, 5).pointerMove(30, 13).pointerMove(5, 3).pointerUp();
    for (let l = 0; l < 14; l++) expect(it.row(l)).toBe(l >= 3 && l <= 5 ? `.....222222${'.'.repeat(21)}` : empty);
    expect(it.editor.session.getState().rectangle).toEqual({
      subcarrierFrom: -11,
      subcarrierTo: -6,
      symbolFrom: 3,
      symbolTo: 5,
    });
    expect(it.editor.session.getState().undoLabel).toBe('Paint 18 cells');
  });

  it('places a comb with its shift by pass within the block', () => {
    const it = headlessEditor().tool('comb', 3);
    const { comb } = it.editor.session.getState();
    it.editor.set({ comb: { ...comb, everySubcarrier: 4, everySymbol: 2, shiftPerPass: 2 } });
    it.pointerDown(0, 1).pointerMove(15, 6).pointerUp();
    expect(it.row(1)).toBe(`3...3...3...3...${'.'.repeat(16)}`);
    expect(it.row(2)).toBe(empty);
    expect(it.row(3)).toBe(`..3...3...3...3.${'.'.repeat(16)}`);
    expect(it.row(5)).toBe(`3...3...3...3...${'.'.repeat(16)}`);
  });

  it('gives its blanks back when cancelled', () => {
    const it = headlessEditor().tool('comb', 3);
    const { comb } = it.editor.session.getState();
    it.pointerDown(0, 1).pointerMove(15, 6);
    it.machine.cancel();
    expect(it.editor.session.getState().comb).toEqual(comb);
    expect(it.row(1)).toBe(empty);
  });
});

describe('pick and pan', () => {
  it('takes the ink under the pointer', () => {
    const it = headlessEditor().tool('brush', 4);
    it.pointerDown(7, 7).pointerUp();
    it.tool('pick', 1).pointerDown(7, 7).pointerUp();
    expect(it.editor.session.getState()).toMatchObject({ ink: 4, chosenSymbol: 7, cursor: { position: 7, symbol: 7 } });
  });

  it('moves the drawing, paints nothing, and puts it back on cancel', () => {
    const it = headlessEditor(testDocument(), { viewport: { widthPx: 320, heightPx: 140 } }).tool('pan');
    it.pointerDown(8, 3).pointerMove(3, 1);
    expect(it.editor.session.getState().viewport).toMatchObject({ firstPosition: 5, firstSymbol: 2 });
    expect(it.row(3)).toBe(empty);
    it.machine.cancel();
    expect(it.editor.session.getState().viewport).toMatchObject({ firstPosition: 0, firstSymbol: 0 });
  });

  it('lets one finger move instead of paint where a person chose so', () => {
    const it = headlessEditor(testDocument(), { oneFingerMoves: true, viewport: { widthPx: 320, heightPx: 140 } });
    it.tool('brush', 1).pointerDown(8, 3, { kind: 'touch' }).pointerMove(3, 1, { kind: 'touch' }).pointerUp();
    expect(it.row(3)).toBe(empty);
    expect(it.editor.session.getState().viewport.firstPosition).toBe(5);
  });

  it('tells the cell under the pointer, none outside', () => {
    const it = headlessEditor();
    it.pointerMove(4, 6);
    expect(it.machine.hover()).toEqual({ position: 4, symbol: 6 });
    it.pointerMove(40, 6);
    expect(it.machine.hover()).toBeNull();
  });
});
