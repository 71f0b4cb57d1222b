import { mkdtempSync, rmSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { gzipSync } from 'node:zlib';
import { buildSync } from 'esbuild';
import type { RevisionFigures } from '@/lib/contracts/waveforms';
import { deriveFigures, type WaveformDocument } from '@/lib/synth/index';
import { createFigures } from '@/server/figures/figures';
import { createMeasureThread, type MeasureAnswer, type Measuring } from '@/server/figures/measureThread';
import { smallDocument } from '../../helpers/documents';
import { measuringInPlace } from '../../helpers/measuring';
import { startTestServer, type Client, type TestServer } from '../../helpers/testServer';
import { bareDocument, create, documentOf, open, save } from '../../helpers/waveformCalls';

async function figuresOnceMeasured(client: Client, revisionId: string): Promise<RevisionFigures> {
  for (let tries = 0; tries < 200; tries += 1) {
    const { figures } = (await client.get(`/api/v1/revisions/${revisionId}/figures`).expect(200)).body;
    if (figures.measured !== null || figures.measureFailed !== null) return figures as RevisionFigures;
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
  throw new Error('never measured');
}

describe('figures', () => {
  let server: TestServer;
  afterEach(() => server.close());

  async function begin(measuring: Measuring): Promise<Client> {
    server = await startTestServer({ measuring });
    return server.as('author');
  }

  /** Two tones of equal power: the envelope peaks at twice the mean power, 3.0103 dB. */
  const twoTones = (): WaveformDocument =>
    smallDocument({
      tray: [
        { inkId: 'k0', name: 'Null', role: 'null', powerDb: 0, value: null },
        {
          inkId: 'k1',
          name: 'Tone',
          role: 'tone',
          powerDb: 0,
          value: { factors: [], phaseDeg: 0, continuous: true },
        },
      ],
      grid: { rows: [[31, 0, 1, 1, 1, 0, 1, 1, 30, 0]], rowOfSymbol: [0, 0, 0, 0] },
    });

  test('two tones have 3.01 dB of peak over mean', async () => {
    const author = await begin(measuringInPlace());
    const { head } = await create(author, twoTones());
    const { measured } = await figuresOnceMeasured(author, head!.revisionId);
    expect(measured!.paprDb).toBeCloseTo(3.0103, 3);
    expect(measured).toMatchObject({ measuredRepeats: 1 });
  });

  test('an empty grid has a clock and a length, and no span and no peak', async () => {
    const author = await begin(measuringInPlace());
    const { head } = await create(author, bareDocument('Bare'));
    const figures = await figuresOnceMeasured(author, head!.revisionId);
    expect(figures.measured).toEqual({
      paprDb: null,
      worstSymbolPaprDb: null,
      worstSymbol: null,
      measuredRepeats: 1,
    });
    expect(figures.numbers).toMatchObject({ sampleClockHz: 960_000, paintedSpanHz: null, lowestSubcarrier: null });
  });

  test.each([
    ['a loop', documentOf('Loop')],
    [
      'a burst with ramps, gap, pad, repeats and a longer first prefix',
      documentOf('Burst', 1, {
        timing: { mode: 'burst', repeats: 3, gapSamples: 100, padSamples: 7 },
        prefixSamples: [20, 16],
        overlapSamples: 8,
        oversampling: 4,
        subcarrierSpacingHz: [31250, 7],
      }),
    ],
    ['nothing painted', bareDocument('Bare')],
  ])('the numbers of %s are those of the signal library', async (_name, document) => {
    const author = await begin(measuringInPlace());
    const { head } = await create(author, document);
    const { numbers } = (await open(author, head!.revisionId)).figures;
    const derived = deriveFigures(document.content);
    expect(numbers.sampleClockHz).toBe(derived.sampleClockHz);
    expect(numbers.fileSamples).toBe(derived.fileSamples);
    expect(numbers.paintedSpanHz ?? 0).toBe(derived.paintedSpanHz ?? 0);
  });

  test('equal contents are measured once, whatever their titles', async () => {
    const measuring = measuringInPlace();
    const author = await begin(measuring);
    const one = await create(author, documentOf('One'));
    await figuresOnceMeasured(author, one.head!.revisionId);
    const two = await create(author, documentOf('Two'));
    expect((await open(author, two.head!.revisionId)).figures.measured).not.toBeNull();
    expect(measuring.measured).toHaveLength(1);
  });

  test('an autosave that the next one overtook is not measured; opened later, it is', async () => {
    const measuring = measuringInPlace();
    let letGo = () => {};
    const held: Measuring = {
      ...measuring,
      async measure(bytes, onAnswer) {
        await new Promise<void>((resolve) => (letGo = resolve));
        await measuring.measure(bytes, onAnswer);
      },
    };
    const author = await begin(held);
    const { waveformId, head } = await create(author, documentOf('Busy', 1)); // taken up at once, and held
    const second = await save(author, waveformId, head!.revisionId, documentOf('Busy', 2));
    const third = await save(author, waveformId, second.revision.revisionId, documentOf('Busy', 3));
    const measuredHeadrooms = () => measuring.measured.map((content) => content.level.headroomDb);
    letGo();
    while (measuredHeadrooms().length < 1) await new Promise((resolve) => setTimeout(resolve, 5));
    await new Promise((resolve) => setTimeout(resolve, 5));
    letGo();
    await figuresOnceMeasured(author, third.revision.revisionId);
    expect(measuredHeadrooms()).toEqual([1, 3]);
  });

  test('a lost row is made again, and what a stop left over is measured by the next start', async () => {
    const author = await begin({ measure: () => Promise.resolve(), stop: () => Promise.resolve() });
    const { head } = await create(author, documentOf('Left over'));
    const measuring = measuringInPlace();
    const next = createFigures(server.deps, measuring);
    await next.settled();
    expect(measuring.measured).toHaveLength(1);
    server.store.sqlite.exec('delete from content_figures');
    const again = next.readAll([head!.contentDigest])(head!.contentDigest);
    expect(again.numbers.sampleClockHz).toBe(20e6);
    expect(again.picture).not.toBeNull();
    await next.settled();
    expect(next.readAll([head!.contentDigest])(head!.contentDigest).measured!.paprDb).toBeGreaterThan(3);
  });

  test('where measuring fails the figures say so, and saving goes on', async () => {
    const author = await begin({
      measure: () => Promise.reject(new Error('no memory')),
      stop: () => Promise.resolve(),
    });
    const { waveformId, head } = await create(author, documentOf('Failing'));
    const figures = await figuresOnceMeasured(author, head!.revisionId);
    expect(figures).toMatchObject({ measured: null, measureFailed: 'The measurement did not end.' });
    await save(author, waveformId, head!.revisionId, documentOf('Failing', 2));
  });
});

describe('the measuring thread', () => {
  const buildDir = mkdtempSync(path.join(os.tmpdir(), 'combwright-build-'));
  beforeAll(() => {
    buildSync({
      entryPoints: ['server/figures/measure.worker.ts'],
      outfile: path.join(buildDir, 'measure.worker.mjs'),
      bundle: true,
      platform: 'node',
      format: 'esm',
      target: 'node20',
    });
  });
  afterAll(() => rmSync(buildDir, { recursive: true, force: true }));

  async function answersTo(thread: Measuring, json: string): Promise<MeasureAnswer[]> {
    const answers: MeasureAnswer[] = [];
    await thread.measure(gzipSync(json), (answer) => answers.push(answer));
    return answers;
  }

  test('answers a picture and then the figures, and outlives a content that cannot be measured', async () => {
    const thread = createMeasureThread(buildDir);
    const bad = await answersTo(thread, '{"fftSize": 64}');
    expect(bad.at(-1)).toMatchObject({ kind: 'failed', words: expect.any(String) });
    const json = JSON.stringify(documentOf('Threaded').content);
    const good = await answersTo(thread, json);
    expect(good.map((answer) => answer.kind)).toEqual(['picture', 'measured']);
    const inPlace: MeasureAnswer[] = [];
    await measuringInPlace().measure(gzipSync(json), (answer) => inPlace.push(answer));
    expect(good).toEqual(inPlace);
    await thread.stop();
  });

  test('a thread that is stopped while it works rejects what it was asked', async () => {
    const thread = createMeasureThread(buildDir);
    const content = documentOf('Long', 1, {
      timing: { mode: 'loop', repeats: 65536, gapSamples: 0, padSamples: 0 },
    }).content;
    content.streams[0]!.acrossRepeats = 'continue';
    const asked = answersTo(thread, JSON.stringify(content));
    const refused = expect(asked).rejects.toThrow('The measuring thread ended.');
    await thread.stop();
    await refused;
  });

  test('without its file the thread fails and says so', async () => {
    const thread = createMeasureThread(path.join(buildDir, 'nowhere'));
    await expect(answersTo(thread, '{}')).rejects.toThrow();
  });
});
