import { performOutcome } from '@/lib/editor/commands/outcome';
import { planRemedy } from '@/lib/editor/commands/remedy';
import { planSettings } from '@/lib/editor/commands/settings';
import { planAddInk, planChangeInk, planRemoveInk, planRemoveStream } from '@/lib/editor/commands/tray';
import { whatFollows } from '@/lib/editor/commands/whatFollows';
import { nearestFftSizes, stepFftSize } from '@/lib/editor/fftSizes';
import { headlessEditor, testDocument } from '../../../helpers/headlessEditor';

describe('numbers', () => {
  it('keeps cells at their signed subcarrier when the FFT size changes, and undoes to the same bytes', () => {
    const it = headlessEditor().tool('brush', 1);
    it.pointerDown(16, 3).pointerMove(20, 3).pointerUp();
    const before = it.bytes();
    const outcome = performOutcome(it.editor, planSettings(it.editor.document, { fftSize: 48 }, 'FFT size 48'));
    expect(outcome?.kind).toBe('patch');
    expect(it.row(3)).toBe(`${'.'.repeat(24)}11111${'.'.repeat(19)}`);
    it.editor.undo();
    expect(it.bytes()).toBe(before);
  });

  it('asks before painted cells are cut', () => {
    const it = headlessEditor().tool('rectangle', 1);
    it.pointerDown(0, 0).pointerMove(31, 10).pointerUp();
    const planned = planSettings(it.editor.document, { fftSize: 16 }, 'FFT size 16');
    expect(planned).toMatchObject({
      kind: 'question',
      question: {
        text: '16 points hold 16 subcarriers. 176 painted cells would be cut.',
        doLabel: 'Cut them',
        keepLabel: 'Keep 32',
      },
    });
    const shorter = planSettings(it.editor.document, { symbolCount: 10 }, 'Symbols 10');
    expect(shorter).toMatchObject({ kind: 'question', question: { keepLabel: 'Keep 14' } });
    expect(JSON.stringify(shorter)).toContain('32 painted cells would be cut.');
    if (planned?.kind !== 'question') throw new Error('no question');
    it.editor.apply(planned.question.patch);
    expect(it.row(3)).toBe('1'.repeat(16));
  });

  it('refuses what the document may not hold, with the field', () => {
    const { document } = headlessEditor().editor;
    expect(planSettings(document, { fftSize: 34 }, '')).toMatchObject({ kind: 'refused', pointer: '/content/fftSize' });
    expect(planSettings(document, { overlapSamples: 5 }, '')).toMatchObject({
      kind: 'refused',
      pointer: '/content/overlapSamples',
    });
    expect(planSettings(document, { symbolCount: 0 }, '')).toMatchObject({
      kind: 'refused',
      pointer: '/content/symbolCount',
    });
    expect(planSettings(document, { oversampling: 1 }, '')).toBeNull();
  });

  it('shortens a prefix list with the frame, and names markers that would go', () => {
    const stored = testDocument({
      prefixSamples: [8, 4, 4, 4],
      markers: [{ name: 'last', at: 'symbol', symbol: 13, offsetSamples: 0, lengthSamples: 1 }],
    });
    const it = headlessEditor(stored);
    const planned = planSettings(it.editor.document, { symbolCount: 3 }, 'Symbols 3');
    expect(planned).toMatchObject({ kind: 'question' });
    if (planned?.kind !== 'question') throw new Error('no question');
    expect(planned.question.text).toContain('“last”');
    const before = it.bytes();
    it.editor.apply(planned.question.patch);
    expect(it.editor.document.settings).toMatchObject({ prefixSamples: [8, 4, 4], markers: [], symbolCount: 3 });
    it.editor.undo();
    expect(it.bytes()).toBe(before);
  });

  it('says what follows', () => {
    const { document } = headlessEditor().editor;
    const [first] = whatFollows(document, { oversampling: 2 });
    expect(first).toEqual({
      name: 'Sample clock',
      now: { value: '480', unit: 'kHz' },
      then: { value: '960', unit: 'kHz' },
    });
    expect(whatFollows(document, { frequencyOffsetHz: 10 })).toEqual([]);
  });

  it('steps through the legal FFT sizes', () => {
    expect(stepFftSize(2048, 1)).toBe(2160);
    expect(stepFftSize(2048, -1)).toBe(2025);
    expect(stepFftSize(2050, 1)).toBe(2160);
    expect(stepFftSize(16384, 5)).toBe(16384);
    expect(nearestFftSizes(2048)).toEqual([1944, 2000, 2025, 2048, 2160]);
  });
});

describe('inks and payload', () => {
  it('removes an ink after a question; later inks move up with their cells', () => {
    const it = headlessEditor().tool('brush', 1);
    it.pointerDown(0, 0).pointerUp();
    it.tool('brush', 4).pointerDown(5, 0).pointerUp();
    const before = it.bytes();
    const planned = planRemoveInk(it.editor.document, 1);
    if (planned?.kind !== 'question') throw new Error('no question');
    expect(planned.question.text).toBe('“QPSK” holds 1 cell. They would become null.');
    it.editor.apply(planned.question.patch);
    expect(it.row(0)).toBe(`.....3${'.'.repeat(26)}`);
    expect(it.editor.document.settings.tray.map(({ inkId }) => inkId)).toEqual(['k0', 'k1', 'k2', 'k3', 'k4']);
    it.editor.undo();
    expect(it.bytes()).toBe(before);
  });

  it('adds and changes inks within the rules', () => {
    const { editor } = headlessEditor();
    const qam = { name: '64-QAM', role: 'data', powerDb: 0 } as const;
    const value = { constellation: '64qam', bitMap: 'ts38211', streamId: 's0' } as const;
    performOutcome(editor, planAddInk(editor.document, { ...qam, value: { ...value } }));
    expect(editor.document.settings.tray[6]).toMatchObject({ inkId: 'k6', name: '64-QAM' });
    expect(planAddInk(editor.document, { ...qam, value: { ...value, streamId: 's4' } })).toMatchObject({
      kind: 'refused',
      pointer: '/content/tray/7/value/streamId',
    });
    expect(planChangeInk(editor.document, 0, { ...qam, value: { ...value } })).toMatchObject({ kind: 'refused' });
    expect(planRemoveStream(editor.document, 0)).toMatchObject({ kind: 'refused' });
  });
});

describe('remedies', () => {
  it('become one patch, and are refused when the value moved on', () => {
    const it = headlessEditor();
    const change = { pointer: '/content/timing/padSamples', before: 0, after: 96 };
    const outcome = performOutcome(it.editor, planRemedy(it.editor.document, [change], 'Pad 96 samples'));
    expect(outcome?.kind).toBe('patch');
    expect(it.editor.document.settings.timing.padSamples).toBe(96);
    expect(it.editor.session.getState().undoLabel).toBe('Pad 96 samples');
    expect(planRemedy(it.editor.document, [change], 'Pad 96 samples')).toMatchObject({ kind: 'refused' });
    const lost = { pointer: '/content/nowhere', before: 0, after: 1 };
    expect(planRemedy(it.editor.document, [lost], '')).toMatchObject({ kind: 'refused' });
  });
});
