import fc from 'fast-check';
import { performOutcome } from '@/lib/editor/commands/outcome';
import { planSettings } from '@/lib/editor/commands/settings';
import { planChangeInk } from '@/lib/editor/commands/tray';
import { storedDocument } from '@/lib/editor/document';
import { createEditor } from '@/lib/editor/store';
import type { WaveformContent } from '@/lib/synth/types';
import { headlessEditor, testDocument, testTray } from '../helpers/headlessEditor';
import type { HeadlessEditor } from '../helpers/headlessEditor';
import { liveDesk, wholeView } from '../helpers/liveDesk';

// Whatever was edited in whatever order, the live figures are those of the document opened anew.

const counted = testTray.map((ink) =>
  ink.role === 'pilot'
    ? {
        ...ink,
        value: { factors: [{ sequence: { kind: 'alternating' as const }, counter: 'cell' as const, start: 2 }] },
      }
    : ink.inkId === 'k1' && ink.role === 'data'
      ? { ...ink, value: { ...ink.value, constellation: 'pi2-bpsk' as const } }
      : ink,
);

const shape = fc.record({
  fill: fc.constantFrom<'running' | 'anchored'>('running', 'anchored'),
  isCounted: fc.boolean(),
  overlapSamples: fc.integer({ min: 0, max: 4 }),
  mode: fc.constantFrom<'loop' | 'burst'>('loop', 'burst'),
  gapSamples: fc.constantFrom(0, 3, 20),
  oversampling: fc.constantFrom(1, 2),
});

const act = fc.oneof(
  {
    weight: 6,
    arbitrary: fc.record({
      kind: fc.constant('stroke' as const),
      ink: fc.integer({ min: 0, max: 5 }),
      from: fc.tuple(fc.integer({ min: 0, max: 31 }), fc.integer({ min: 0, max: 13 })),
      to: fc.tuple(fc.integer({ min: 0, max: 31 }), fc.integer({ min: 0, max: 13 })),
      isCancelled: fc.boolean(),
    }),
  },
  fc.record({ kind: fc.constant('undo' as const) }),
  fc.record({
    kind: fc.constant('power' as const),
    powerDb: fc.integer({ min: -6, max: 6 }),
    place: fc.integer({ min: 1, max: 5 }),
  }),
  fc.record({ kind: fc.constant('size' as const), symbolCount: fc.integer({ min: 3, max: 14 }) }),
  { weight: 4, arbitrary: fc.record({ kind: fc.constant('work' as const), pieces: fc.integer({ min: 1, max: 40 }) }) },
);
type Act = typeof act extends fc.Arbitrary<infer T> ? T : never;

function perform(it: HeadlessEditor, step: Exclude<Act, { kind: 'work' }>): void {
  const { editor } = it;
  if (step.kind === 'undo') editor.undo();
  else if (step.kind === 'stroke') {
    it.tool('brush', step.ink)
      .pointerDown(...step.from)
      .pointerMove(...step.to);
    if (step.isCancelled) it.machine.cancel();
    it.pointerUp();
  } else {
    const { inkId: _inkId, ...ink } = editor.document.settings.tray[step.kind === 'power' ? step.place : 0]!;
    const planned =
      step.kind === 'power'
        ? planChangeInk(editor.document, step.place, { ...ink, powerDb: step.powerDb } as Parameters<
            typeof planChangeInk
          >[2])
        : planSettings(editor.document, { symbolCount: step.symbolCount }, 'Symbols');
    if (planned?.kind === 'question') editor.apply(planned.question.patch);
    else performOutcome(editor, planned);
  }
}

it('keeps the figures of the document opened anew', () => {
  fc.assert(
    fc.property(shape, fc.array(act, { minLength: 1, maxLength: 10 }), (of, steps) => {
      const content: Partial<WaveformContent> = {
        tray: of.isCounted ? counted : testTray,
        overlapSamples: of.overlapSamples,
        oversampling: of.oversampling,
        streams: [{ ...testDocument().content.streams[0]!, fill: of.fill }],
        timing: { mode: of.mode, repeats: 1, gapSamples: of.gapSamples, padSamples: 0 },
      };
      const it = headlessEditor(testDocument(content));
      it.tool('rectangle', 2).pointerDown(5, 0).pointerMove(24, 13).pointerUp();
      it.tool('rectangle', 3).pointerDown(8, 2).pointerMove(9, 11).pointerUp();
      const desk = liveDesk(it.editor, wholeView(32, { symbol: 2 })).settle();
      for (const step of steps) {
        if (step.kind === 'work') desk.run(step.pieces);
        else perform(it, step);
      }
      const kept = desk.settle().result();
      const anew = liveDesk(createEditor(storedDocument(it.editor.document)), wholeView(32, { symbol: 2 }))
        .settle()
        .result();
      expect(kept.changeCount).toBe(it.editor.session.getState().changeCount);
      expect([...kept.symbolPaprDb]).toEqual([...anew.symbolPaprDb]);
      expect(kept.time).toEqual(anew.time);
      expect(kept.ccdf).toEqual(anew.ccdf);
      expect(kept.constellation).toEqual(anew.constellation);
      // the averaged spectrum is kept by adding and taking away: equal but for roundings
      const rounded = (result: typeof kept) => result.figures.map(({ id, value }) => [id, value?.toPrecision(6)]);
      expect(rounded(kept)).toEqual(rounded(anew));
    }),
    { numRuns: 60 },
  );
});
