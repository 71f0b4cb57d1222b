import type { Bench } from '@/lib/contracts/benches';
import type { Fit } from '@/lib/contracts/fit';
import type { BenchContent, WaveformDocument } from '@/lib/synth/index';
import { openBench } from '../../helpers/documents';
import { measuringInPlace } from '../../helpers/measuring';
import { startTestServer, type Client, type TestServer, type TestServerOptions } from '../../helpers/testServer';
import { bareDocument, create, documentOf } from '../../helpers/waveformCalls';

let server: TestServer;
let author: Client;
afterEach(() => server.close());

async function begin(options: TestServerOptions = { measuring: measuringInPlace() }): Promise<void> {
  server = await startTestServer(options);
  author = await server.as('author');
}

async function makeBench(overrides: Partial<BenchContent>): Promise<Bench> {
  const admin = await server.as('admin');
  return (await admin.post('/api/v1/benches', openBench(overrides)).expect(201)).body as Bench;
}

async function fitOf(document: WaveformDocument, benchId: string, query = ''): Promise<Fit> {
  const { head } = await create(author, document);
  const path = `/api/v1/revisions/${head!.revisionId}/fit?benchId=${benchId}${query}`;
  for (let tries = 0; tries < 100; tries += 1) {
    const fit = (await author.get(path).expect(200)).body as Fit;
    if (fit.levels !== 'measuring') return fit;
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
  throw new Error('never measured');
}

const finding = (fit: Fit, check: string) => fit.findings.find((one) => one.check === check)!;

test('a file that misses the granularity is told by how much, with a remedy as plain changes', async () => {
  await begin();
  const bench = await makeBench({ granularitySamples: 256, leastSamples: 256, mostSamples: 256 * 1000 });
  const fit = await fitOf(documentOf('Short'), bench.benchId); // 320 samples
  expect(fit.bench).toEqual({ benchId: bench.benchId, version: 1, name: 'Test bench, 16 bit', isNewest: true });
  const granularity = finding(fit, 'granularity');
  expect(granularity).toMatchObject({ verdict: 'misses', hard: true, measured: 320, limit: 256 });
  const pointers = granularity.remedies.flatMap((remedy) => remedy.changes.map((change) => change.pointer));
  expect(pointers).toContain('/content/timing/repeats');
});

test('headroom is judged from the measured rendering: 1 dB was asked, 1 dB is found', async () => {
  await begin();
  const bench = await makeBench({ leastHeadroomDb: 0.5 });
  const fit = await fitOf(documentOf('Level', 1), bench.benchId);
  expect(fit.levels).toBe('measured');
  const headroom = finding(fit, 'headroom');
  expect(headroom.verdict).toBe('meets');
  expect(headroom.measured).toBeCloseTo(1, 1);
  expect(finding(await fitOf(documentOf('Level', 0), bench.benchId), 'headroom').verdict).toBe('misses');
});

test('while the levels are measured it says so, and judges all the rest', async () => {
  await begin({});
  const bench = await makeBench({});
  const { head } = await create(author, documentOf('Early'));
  const fit = (await author.get(`/api/v1/revisions/${head!.revisionId}/fit?benchId=${bench.benchId}`).expect(200))
    .body as Fit;
  expect(fit.levels).toBe('measuring');
  expect(finding(fit, 'headroom').verdict).toBe('cannotJudge');
  expect(finding(fit, 'clock').verdict).toBe('meets');
});

test('nothing painted has no level: the fit still answers', async () => {
  await begin();
  const bench = await makeBench({});
  const fit = await fitOf(bareDocument('Bare'), bench.benchId);
  expect(finding(fit, 'headroom').verdict).toBe('cannotJudge');
});

test('an older version is judged by its own limits and says that a newer one exists', async () => {
  await begin();
  const bench = await makeBench({ mostSamples: 1000 });
  const admin = await server.as('admin');
  await admin
    .post(`/api/v1/benches/${bench.benchId}/versions?afterVersion=1`, openBench({ mostSamples: 100 }))
    .expect(201);
  const { head } = await create(author, documentOf('Versions'));
  const ask = async (query: string) =>
    (await author.get(`/api/v1/revisions/${head!.revisionId}/fit?benchId=${bench.benchId}${query}`).expect(200))
      .body as Fit;
  const [newest, first] = [await ask(''), await ask('&version=1')];
  expect(newest.bench).toMatchObject({ version: 2, isNewest: true });
  expect(finding(newest, 'memory').verdict).toBe('misses');
  expect(first.bench).toMatchObject({ version: 1, isNewest: false });
  expect(finding(first, 'memory').verdict).toBe('meets');
});

test('a file that cannot be written is listed, in words', async () => {
  await begin();
  const bench = await makeBench({ container: 'wav', mostSamples: 2 ** 40 });
  expect((await fitOf(documentOf('Short'), bench.benchId)).notSupportedYet).toEqual([]);
  const long = documentOf('Long');
  long.content.timing = { ...long.content.timing, padSamples: 2 ** 30 };
  expect((await fitOf(long, bench.benchId)).notSupportedYet).toMatchObject([
    { pointer: '/content/container', message: expect.stringContaining('a WAV file has at most 4294967295') },
  ]);
});

test('a bench that is not there is not there', async () => {
  await begin();
  const { head } = await create(author, documentOf('Lost'));
  const path = `/api/v1/revisions/${head!.revisionId}/fit?benchId=01ARZ3NDEKTSV4RRFFQ69G5FAV`;
  await author.get(path).expect(404);
});
