import { createHash } from 'node:crypto';
import { performOutcome } from '@/lib/editor/commands/outcome';
import { planSettings } from '@/lib/editor/commands/settings';
import { planAddInk } from '@/lib/editor/commands/tray';
import { contentOf, storedDocument } from '@/lib/editor/document';
import { createEditor } from '@/lib/editor/store';
import type { LiveResult } from '@/lib/editor/live/protocol';
import type { BenchContent, WaveformContent } from '@/lib/synth/types';
import { createFrameMeasure, createSynthesis, pilotReach, welchSpectrum } from '@/lib/synth/index';
import { headlessEditor, testDocument } from '../../../../helpers/headlessEditor';
import { liveDesk, wholeView } from '../../../../helpers/liveDesk';
import { renderWords } from '../../../../helpers/renderWords';

const bench: BenchContent = {
  sampleClockHz: { least: 1, most: 1e9, step: null },
  word: 'int16',
  bits: 16,
  align: 'left',
  numberFormat: 'twosComplement',
  byteOrder: 'little',
  layout: 'interleaved',
  container: 'raw',
  swapIq: false,
  negateQ: false,
  granularitySamples: 1,
  leastSamples: 1,
  mostSamples: 1e9,
  leastHeadroomDb: 0,
  levelMeans: 'fileRms',
  markers: { count: 0, packing: 'none', leastSamples: 1, stepSamples: 1 },
  modes: ['loop', 'burst'],
  fileName: { most: 32, extension: 'bin' },
};

function painted(content: Partial<WaveformContent> = {}) {
  const it = headlessEditor(testDocument(content));
  it.tool('rectangle', 1).pointerDown(4, 0).pointerMove(27, 13).pointerUp();
  it.tool('comb', 3);
  it.editor.set({
    comb: { ...it.editor.session.getState().comb, everySubcarrier: 4, everySymbol: 3, shiftPerPass: 2 },
  });
  it.pointerDown(4, 1).pointerMove(27, 13).pointerUp();
  return it;
}

function figure(result: LiveResult, id: string): number {
  const value = result.figures.find((row) => row.id === id)?.value;
  if (value === null || value === undefined) throw new Error(`no figure ${id}`);
  return value;
}

const shapes: [string, Partial<WaveformContent>][] = [
  ['a loop', {}],
  ['a loop with ramps', { overlapSamples: 3 }],
  [
    'a burst with ramps and a gap',
    { overlapSamples: 2, timing: { mode: 'burst', repeats: 1, gapSamples: 20, padSamples: 0 } },
  ],
  ['oversampled, uneven prefixes', { oversampling: 3, prefixSamples: [9, 4, 4, 4], overlapSamples: 4 }],
  ['a lowered peak', { overlapSamples: 2, peakReduction: { kind: 'clipAndFilter', targetPaprDb: 5, iterations: 3 } }],
  [
    'a lowered peak in a burst',
    {
      overlapSamples: 2,
      timing: { mode: 'burst', repeats: 1, gapSamples: 20, padSamples: 0 },
      peakReduction: { kind: 'clipAndFilter', targetPaprDb: 4, iterations: 2 },
    },
  ],
];

describe('live figures', () => {
  it.each(shapes)('are those of the whole document measured at once: %s', (_, shape) => {
    const it = painted(shape);
    const result = liveDesk(it.editor, wholeView(32)).settle().result();
    const content = contentOf(it.editor.document);
    const measuring = createFrameMeasure(content);
    while (measuring.step());
    const whole = measuring.result();
    expect(figure(result, 'paprFrame')).toBeCloseTo(whole.power.paprDb!, 9);
    expect(figure(result, 'rms')).toBeCloseTo(Math.sqrt(whole.power.meanPower), 12);
    expect(result.worstSymbol).toBe(whole.power.peakSlot);
    result.symbolPaprDb.forEach((papr, symbol) => expect(papr).toBeCloseTo(whole.symbolPaprDb[symbol]!, 4));
    const reach = pilotReach(content).pairs[0]!;
    expect(figure(result, 'delayReach')).toBe(reach.delayWindowSec);
    expect(figure(result, 'dopplerReach')).toBe(reach.dopplerHz);
  });

  it('are the same after edits as when opened anew', () => {
    for (const [, shape] of shapes) {
      const it = painted(shape);
      const desk = liveDesk(it.editor, wholeView(32));
      desk.settle();
      it.tool('brush', 2).pointerDown(6, 13).pointerMove(20, 13).pointerUp();
      desk.run(1);
      it.pointerDown(9, 0).pointerMove(12, 5).pointerUp();
      it.editor.undo();
      it.editor.redo();
      const edited = desk.settle().result();
      const fresh = liveDesk(createEditor(storedDocument(it.editor.document)), wholeView(32))
        .settle()
        .result();
      expect(edited.changeCount).toBe(it.editor.session.getState().changeCount);
      expect(edited.figures.map(({ id, value }) => [id, value?.toPrecision(9)])).toEqual(
        fresh.figures.map(({ id, value }) => [id, value?.toPrecision(9)]),
      );
      expect(edited.ccdf).toEqual(fresh.ccdf);
      expect(edited.time).toEqual(fresh.time);
      edited.spectrum!.db.max.forEach((db, column) => {
        if (db > -120) expect(db).toBeCloseTo(fresh.spectrum!.db.max[column]!, 2);
      });
    }
  });

  it('follow running streams and counted cells into later symbols', () => {
    const streams = [{ ...testDocument().content.streams[0]!, fill: 'running' as const }];
    const it = painted({ streams });
    const desk = liveDesk(it.editor, wholeView(32));
    desk.settle();
    it.tool('brush', 2).pointerDown(6, 4).pointerUp();
    const edited = desk.settle().result();
    const fresh = liveDesk(createEditor(storedDocument(it.editor.document)), wholeView(32))
      .settle()
      .result();
    expect([...edited.symbolPaprDb]).toEqual([...fresh.symbolPaprDb]);
    expect(edited.symbolsDone).toBeGreaterThanOrEqual(10);
  });

  it('synthesizes what an edit touched and no more', () => {
    const it = painted();
    const desk = liveDesk(it.editor, wholeView(32));
    desk.settle();
    it.tool('brush', 2).pointerDown(6, 4).pointerUp();
    expect(desk.settle().result().symbolsDone).toBeLessThanOrEqual(3);
    performOutcome(
      it.editor,
      planSettings(it.editor.document, { level: { reference: 'rms', headroomDb: 9 } }, 'Level'),
    );
    expect(desk.settle().result().symbolsDone).toBe(0);
    const spare = { name: 'Guard', role: 'reserved', powerDb: 0, value: null } as const;
    performOutcome(it.editor, planAddInk(it.editor.document, spare));
    const before = desk.answers.length;
    const result = desk.settle().result();
    expect(desk.answers.length).toBe(before + 1);
    expect(result.changeCount).toBe(it.editor.session.getState().changeCount);
    it.tool('brush', 6).pointerDown(6, 4).pointerUp();
    const fresh = liveDesk(createEditor(storedDocument(it.editor.document)), wholeView(32))
      .settle()
      .result();
    expect([...desk.settle().result().symbolPaprDb]).toEqual([...fresh.symbolPaprDb]);
  });
});

describe('live traces', () => {
  it('agree with a spectrum of the rendered samples', () => {
    const it = painted({ overlapSamples: 3, oversampling: 2 });
    const result = liveDesk(it.editor, wholeView(32)).settle().result();
    const content = contentOf(it.editor.document);
    const synthesis = createSynthesis(content);
    const samples = new Float64Array(2 * synthesis.samples);
    synthesis.read(samples);
    // Welch, IEEE Trans. AU-15, 1967: another set of segments of the same signal agrees in the mean of a flat band
    const clockHz = 15000 * 32 * 2;
    const whole = welchSpectrum(samples, { clockHz, segmentLength: 64 });
    const mean = (from: number, to: number) => {
      let sum = 0;
      for (let k = from; k <= to; k++) sum += whole.density[k + 32]! * 15000 * 32;
      return 10 * Math.log10(sum / (to - from + 1));
    };
    let live = 0;
    for (let k = -10; k <= 9; k++) live += 10 ** (result.spectrum!.db.max[k + 16]! / 10);
    expect(10 * Math.log10(live / 20)).toBeCloseTo(mean(-10, 9), 0);
    expect(Math.max(...result.spectrum!.db.min.slice(0, 2))).toBeLessThan(mean(-10, 9) - 10);
    expect(result.spectrum!.recipe).toContain('of the rendered samples');
  });

  it('show the prefix as the copy of the tail, and the peak where it is', () => {
    const it = painted();
    const { time } = liveDesk(it.editor, wholeView(32, { timeWidthPx: 4096, symbol: 2 }))
      .settle()
      .result();
    const columns = time!.envelope.max.length;
    expect(columns).toBe((32 + 4) * 4);
    expect([...time!.envelope.max.slice(0, 16)]).toEqual([...time!.envelope.max.slice(columns - 16)]);
    expect(Math.max(...time!.envelope.max)).toBeCloseTo(time!.peak!.ratio, 6);
    expect(20 * Math.log10(time!.peak!.ratio)).toBeCloseTo(time!.paprDb!, 6);
    expect(time).toMatchObject({ from: -4, to: 32, tail: { from: 28, to: 32 } });
  });

  it('never skip a peak, however narrow the plot', () => {
    const it = painted();
    for (const timeWidthPx of [3, 17, 50]) {
      const { time } = liveDesk(it.editor, wholeView(32, { timeWidthPx })).settle().result();
      expect(time!.envelope.max).toHaveLength(timeWidthPx);
      expect(Math.max(...time!.envelope.max)).toBeCloseTo(time!.peak!.ratio, 6);
    }
  });

  it('show the chosen ink without its power', () => {
    const it = painted();
    const pilots = liveDesk(it.editor, wholeView(32, { ink: 3 }))
      .settle()
      .result().constellation!;
    expect(pilots.points.length / 2).toBe(pilots.cells);
    for (let i = 0; i < pilots.points.length; i += 2) {
      expect(Math.abs(pilots.points[i]!)).toBeCloseTo(1, 6);
      expect(pilots.points[i + 1]).toBeCloseTo(0, 6);
    }
    expect(
      liveDesk(it.editor, wholeView(32, { ink: 0 }))
        .settle()
        .result().constellation,
    ).toBeNull();
  });

  it('say nothing of an empty grid', () => {
    const { editor } = headlessEditor();
    const result = liveDesk(editor, wholeView(32)).settle().result();
    expect(result).toMatchObject({ worstSymbol: null, ccdf: null, constellation: null });
    expect(result.time!.peak).toBeNull();
    expect(result.figures.find(({ id }) => id === 'paprFrame')!.value).toBeNull();
  });
});

describe('live worker', () => {
  it('asks for the document when a patch is missing, and is right again', () => {
    const it = painted();
    const desk = liveDesk(it.editor, wholeView(32));
    desk.settle();
    desk.loseNext();
    it.tool('brush', 2).pointerDown(6, 4).pointerUp();
    it.pointerDown(6, 5).pointerMove(9, 7).pointerUp();
    const result = desk.settle().result();
    expect(desk.answers.filter(({ kind }) => kind === 'documentWanted')).toHaveLength(1);
    expect(result.changeCount).toBe(it.editor.session.getState().changeCount);
    const fresh = liveDesk(createEditor(storedDocument(it.editor.document)), wholeView(32))
      .settle()
      .result();
    expect([...result.symbolPaprDb]).toEqual([...fresh.symbolPaprDb]);
  });

  it('says that the views stopped when the thread dies, and starts again', async () => {
    const it = painted();
    const desk = liveDesk(it.editor, wholeView(32));
    const asked = desk.client.digest(bench);
    asked.catch(() => undefined);
    desk.crash();
    expect(desk.client.state.getState()).toMatchObject({
      status: 'stopped',
      message: 'The live views stopped. Your drawing is safe.',
    });
    await expect(asked).rejects.toThrow('The live views stopped.');
    it.tool('brush', 2).pointerDown(6, 4).pointerUp();
    desk.client.start();
    const result = desk.settle().result();
    expect(result.changeCount).toBe(it.editor.session.getState().changeCount);
    expect(desk.client.state.getState()).toMatchObject({ status: 'running', message: null });
  });

  it('hears newer patches between two symbols', () => {
    const it = painted();
    const desk = liveDesk(it.editor, wholeView(32));
    desk.run(5);
    expect(desk.answers).toHaveLength(0);
    it.tool('brush', 2).pointerDown(6, 4).pointerUp();
    const result = desk.settle().result();
    expect(desk.answers.filter(({ kind }) => kind === 'result')).toHaveLength(1);
    expect(result.changeCount).toBe(it.editor.session.getState().changeCount);
  });

  it('takes the digest of the words that a pack holds', async () => {
    for (const [, shape] of shapes) {
      const it = painted(shape);
      const desk = liveDesk(it.editor, wholeView(32));
      const asked = desk.client.digest(bench);
      desk.settle();
      const digest = await asked;
      const { bytes } = renderWords(contentOf(it.editor.document), bench);
      expect(digest).toMatchObject({
        bytes: bytes.length,
        sha256: createHash('sha256').update(bytes).digest('hex'),
      });
    }
  });

  it('refuses the digest of silence and of what cannot be written yet, with words', async () => {
    const desk = liveDesk(headlessEditor().editor, wholeView(32));
    const silent = desk.client.digest(bench);
    const wav = desk.client.digest({ ...bench, container: 'wav' });
    silent.catch(() => undefined);
    wav.catch(() => undefined);
    desk.settle();
    await expect(silent).rejects.toThrow('Nothing is painted.');
    await expect(wav).rejects.toThrow();
  });

  it('goes on after a state that cannot be synthesized', () => {
    const it = painted();
    const desk = liveDesk(it.editor, wholeView(32));
    desk.settle();
    // a patch that no form plans: the payload goes, its inks stay
    const { streams } = it.editor.document.settings;
    it.editor.apply({ label: 'Lose', changes: [{ kind: 'streams', before: streams, after: [] }] });
    desk.settle();
    expect(desk.answers.at(-1)).toMatchObject({ kind: 'failed' });
    it.tool('brush', 2).pointerDown(6, 4).pointerUp();
    desk.settle();
    it.editor.apply({ label: 'Find', changes: [{ kind: 'streams', before: [], after: streams }] });
    const result = desk.settle().result();
    const fresh = liveDesk(createEditor(storedDocument(it.editor.document)), wholeView(32))
      .settle()
      .result();
    expect([...result.symbolPaprDb]).toEqual([...fresh.symbolPaprDb]);
    expect(desk.client.state.getState().message).toBeNull();
  });
});
