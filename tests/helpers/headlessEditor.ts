import { emptyDocument } from '@/lib/document/newDocument';
import { editorCommands } from '@/lib/editor/commands/all';
import { createEditor } from '@/lib/editor/store';
import type { Editor, EditorOptions } from '@/lib/editor/store';
import { createToolMachine } from '@/lib/editor/tools/machine';
import type { PointerInput, ToolMachine } from '@/lib/editor/tools/machine';
import type { ToolName } from '@/lib/editor/types';
import type { Ink, WaveformDocument } from '@/lib/synth/types';

/** Cells are this large on the headless screen, so that a cell's middle is at (n + ½) · 20 px. */
const CELL_PX = 20;

/** A small tray: null, QPSK, 16-QAM, a pilot, a tone, reserved. */
export const testTray: Ink[] = [
  { inkId: 'k0', name: 'Null', role: 'null', powerDb: 0, value: null },
  {
    inkId: 'k1',
    name: 'QPSK',
    role: 'data',
    powerDb: 0,
    value: { constellation: 'qpsk', bitMap: 'ts38211', streamId: 's0' },
  },
  {
    inkId: 'k2',
    name: '16-QAM',
    role: 'data',
    powerDb: 0,
    value: { constellation: '16qam', bitMap: 'ts38211', streamId: 's0' },
  },
  {
    inkId: 'k3',
    name: 'Pilot',
    role: 'pilot',
    powerDb: 3,
    value: { factors: [{ sequence: { kind: 'alternating' }, counter: 'subcarrier', start: 0 }] },
  },
  {
    inkId: 'k4',
    name: 'Tone',
    role: 'tone',
    powerDb: 6,
    value: { factors: [], phaseDeg: 0, continuous: true },
  },
  { inkId: 'k5', name: 'Reserved', role: 'reserved', powerDb: 0, value: null },
];

export function testDocument(content: Partial<WaveformDocument['content']> = {}): WaveformDocument {
  return emptyDocument({ content: { fftSize: 32, symbolCount: 14, prefixSamples: [4], tray: testTray, ...content } });
}

/** An editor without a screen: pointers by cells (position, symbol), keys by their shortcut. */
export interface HeadlessEditor {
  editor: Editor;
  machine: ToolMachine;
  pointerDown(position: number, symbol: number, pointer?: Partial<PointerInput>): HeadlessEditor;
  pointerMove(position: number, symbol: number, pointer?: Partial<PointerInput>): HeadlessEditor;
  pointerUp(pointer?: Partial<PointerInput>): HeadlessEditor;
  key(shortcut: string): HeadlessEditor;
  tool(name: ToolName, ink?: number): HeadlessEditor;
  /** Ink numbers of a symbol as text: "..11..". */
  row(symbol: number): string;
  bytes(): string;
}

export function headlessEditor(
  stored: WaveformDocument = testDocument(),
  options: EditorOptions & { oneFingerMoves?: boolean } = {},
): HeadlessEditor {
  const { fftSize, symbolCount } = stored.content;
  const editor = createEditor(stored, {
    ...options,
    viewport: {
      widthPx: fftSize * CELL_PX,
      heightPx: symbolCount * CELL_PX,
      subcarrierPx: CELL_PX,
      symbolPx: CELL_PX,
      ...options.viewport,
    },
  });
  const machine = createToolMachine(editor, { oneFingerMoves: () => options.oneFingerMoves ?? false });
  let last = { xPx: 0, yPx: 0 };
  const input = (pointer: Partial<PointerInput>): PointerInput => ({
    pointerId: 1,
    kind: 'mouse',
    button: 0,
    ...last,
    ...pointer,
  });
  const at = (position: number, symbol: number) => {
    last = { xPx: (position + 0.5) * CELL_PX, yPx: (symbol + 0.5) * CELL_PX };
  };
  const self: HeadlessEditor = {
    editor,
    machine,
    pointerDown(position, symbol, pointer = {}) {
      at(position, symbol);
      machine.pointerDown(input(pointer));
      return self;
    },
    pointerMove(position, symbol, pointer = {}) {
      at(position, symbol);
      machine.pointerMove(input(pointer));
      return self;
    },
    pointerUp(pointer = {}) {
      machine.pointerUp(input(pointer));
      return self;
    },
    key(shortcut) {
      const command = editorCommands.byShortcut(shortcut);
      if (!command) throw new Error(`no command on ${shortcut}`);
      editorCommands.run(editor, command.id);
      return self;
    },
    tool(name, ink) {
      editor.set(ink === undefined ? { tool: name } : { tool: name, ink });
      return self;
    },
    row(symbol) {
      const size = editor.document.settings.fftSize;
      const row = editor.document.cells.subarray(symbol * size, (symbol + 1) * size);
      return [...row].map((ink) => (ink === 0 ? '.' : String(ink))).join('');
    },
    bytes: () => JSON.stringify([[...editor.document.cells], editor.document.settings, editor.document.intent]),
  };
  return self;
}
