import fc from 'fast-check';
import { performOutcome } from '@/lib/editor/commands/outcome';
import { planComb } from '@/lib/editor/commands/paint';
import { planSettings } from '@/lib/editor/commands/settings';
import { planRemoveInk } from '@/lib/editor/commands/tray';
import { storedDocument } from '@/lib/editor/document';
import { applyPatch, invertPatch } from '@/lib/editor/patch';
import { createEditor } from '@/lib/editor/store';
import type { Patch, ToolName } from '@/lib/editor/types';
import { headlessEditor } from '../helpers/headlessEditor';
import type { HeadlessEditor } from '../helpers/headlessEditor';

const cell = fc.tuple(fc.integer({ min: -3, max: 40 }), fc.integer({ min: -2, max: 16 }));
const stroke = fc.record({
  kind: fc.constant('stroke' as const),
  tool: fc.constantFrom<ToolName>('brush', 'rectangle', 'comb'),
  ink: fc.integer({ min: 0, max: 5 }),
  size: fc.tuple(fc.integer({ min: 1, max: 5 }), fc.integer({ min: 1, max: 3 })),
  path: fc.array(cell, { minLength: 1, maxLength: 6 }),
});
const combForm = fc.record({
  kind: fc.constant('comb' as const),
  every: fc.integer({ min: 1, max: 9 }),
  shift: fc.integer({ min: -9, max: 9 }),
  ink: fc.integer({ min: 0, max: 3 }),
});
const sizes = fc.record({
  kind: fc.constant('size' as const),
  fftSize: fc.constantFrom(16, 20, 27, 32, 48),
  symbolCount: fc.integer({ min: 1, max: 16 }),
});
const removeInk = fc.record({ kind: fc.constant('removeInk' as const), place: fc.integer({ min: 1, max: 3 }) });
const act = fc.oneof({ weight: 5, arbitrary: stroke }, combForm, sizes, removeInk);
type Act = typeof act extends fc.Arbitrary<infer T> ? T : never;

function draw(it: HeadlessEditor, { tool, ink, size, path }: Extract<Act, { kind: 'stroke' }>): void {
  const [subcarriers, symbols] = size;
  it.tool(tool, Math.min(ink, it.editor.document.settings.tray.length - 1));
  it.editor.set({ brush: { subcarriers, symbols } });
  path.forEach(([position, symbol], i) =>
    i === 0 ? it.pointerDown(position, symbol) : it.pointerMove(position, symbol),
  );
}

function perform(it: HeadlessEditor, step: Act): void {
  const { editor } = it;
  if (step.kind === 'stroke') {
    draw(it, step);
    it.pointerUp();
    return;
  }
  const comb = editor.session.getState().comb;
  const outcome =
    step.kind === 'comb'
      ? planComb(
          editor,
          { ...comb, everySubcarrier: step.every, shiftPerPass: step.shift },
          Math.min(step.ink, editor.document.settings.tray.length - 1),
        )
      : step.kind === 'size'
        ? planSettings(editor.document, { fftSize: step.fftSize, symbolCount: step.symbolCount }, 'Size')
        : planRemoveInk(editor.document, Math.min(step.place, editor.document.settings.tray.length - 1));
  if (outcome?.kind === 'question') editor.apply(outcome.question.patch);
  else performOutcome(editor, outcome);
}

const acts = fc.array(act, { minLength: 1, maxLength: 12 });

describe('editor laws', () => {
  it('n undos lead to the first bytes, n redos to the last', () => {
    fc.assert(
      fc.property(acts, (steps) => {
        const it = headlessEditor();
        const first = it.bytes();
        for (const step of steps) perform(it, step);
        const last = it.bytes();
        let undone = 0;
        while (it.editor.undo()) undone++;
        expect(it.bytes()).toBe(first);
        for (let i = 0; i < undone; i++) expect(it.editor.redo()).toBe(true);
        expect(it.editor.redo()).toBe(false);
        expect(it.bytes()).toBe(last);
      }),
      { numRuns: 150 },
    );
  });

  it('a patch and its inverse leave the same bytes', () => {
    fc.assert(
      fc.property(acts, (steps) => {
        const it = headlessEditor();
        const patches: Patch[] = [];
        it.editor.onPatch((patch) => patches.push(patch));
        for (const step of steps) perform(it, step);
        const last = it.bytes();
        for (const patch of [...patches].reverse()) {
          applyPatch(it.editor.document, invertPatch(patch));
          applyPatch(it.editor.document, invertPatch(invertPatch(patch)));
          applyPatch(it.editor.document, invertPatch(patch));
        }
        expect(it.bytes()).toBe(headlessEditor().bytes());
        for (const patch of patches) applyPatch(it.editor.document, patch);
        expect(it.bytes()).toBe(last);
      }),
      { numRuns: 150 },
    );
  });

  it('cancel means that nothing happened', () => {
    fc.assert(
      fc.property(fc.array(act, { maxLength: 4 }), stroke, (steps, cancelled) => {
        const it = headlessEditor();
        for (const step of steps) perform(it, step);
        const before = it.bytes();
        const { undoLabel, redoLabel, comb, rectangle } = it.editor.session.getState();
        draw(it, cancelled);
        it.machine.cancel();
        it.pointerUp();
        expect(it.bytes()).toBe(before);
        expect(it.editor.session.getState()).toMatchObject({ undoLabel, redoLabel, comb, rectangle });
      }),
      { numRuns: 150 },
    );
  });

  it('a listener that does every patch holds the same document', () => {
    fc.assert(
      fc.property(acts, (steps) => {
        const it = headlessEditor();
        const mirror = createEditor(storedDocument(it.editor.document)).document;
        it.editor.onPatch((patch) => applyPatch(mirror, structuredClone(patch)));
        for (const step of steps) perform(it, step);
        expect(storedDocument(mirror)).toEqual(storedDocument(it.editor.document));
      }),
      { numRuns: 100 },
    );
  });
});
