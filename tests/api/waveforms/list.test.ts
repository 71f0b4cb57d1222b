import type { WaveformList } from '@/lib/contracts/waveforms';
import { openBench } from '../../helpers/documents';
import { createBench, makePack } from '../../helpers/packCalls';
import { grant } from '../../helpers/roles';
import { startTestServer, type Client, type TestServer } from '../../helpers/testServer';
import { ask, create, createReleased, documentOf, open, save, show, withdrawing } from '../../helpers/waveformCalls';

let server: TestServer;
let author: Client;
let reviewer: Client;
let operator: Client;
beforeEach(async () => {
  server = await startTestServer();
  author = await server.as('author');
  reviewer = await server.as('reviewer');
  operator = await server.as('operator');
});
afterEach(() => server.close());

async function list(client: Client, query = ''): Promise<WaveformList> {
  return (await client.get(`/api/v1/waveforms${query}`).expect(200)).body as WaveformList;
}
const titles = (answer: WaveformList) => answer.items.map((item) => item.title);

test('a row tells head, edition, clock, span, picture and who changed it; last changed first', async () => {
  const { waveformId, revisionId } = await createReleased(author, reviewer, documentOf('Ladder'));
  server.clock.advance(1000);
  await create(author, documentOf('Notch', 2));
  server.clock.advance(1000);
  const saved = await save(await server.as('otherAuthor'), waveformId, revisionId, documentOf('Ladder', 3));
  const answer = await list(author);
  expect(titles(answer)).toEqual(['Ladder', 'Notch']);
  const [ladder] = answer.items;
  expect(ladder).toMatchObject({
    waveformId,
    revisionId: saved.revision.revisionId,
    stamp: { state: 'draft' },
    newestEdition: { number: 1, revisionId },
    changedBy: { name: 'Otto Author' },
    changedAtMs: server.clock.nowMs(),
    waitsForYourReview: false,
    withdrawnReason: null,
    figures: {
      numbers: {
        fftSize: 64,
        subcarrierSpacingHz: [312500, 1],
        sampleClockHz: 20e6,
        // k = −26…26
        lowestSubcarrier: -26,
        highestSubcarrier: 26,
        paintedSpanHz: 53 * 312500,
        fileSamples: 4 * 80,
      },
    },
  });
  // 72 columns of the band, one row per symbol; all four are alike
  expect(ladder!.figures.picture).toMatchObject({ columns: 72, rowCount: 4, styles: ['null', 'qpsk', 'pilot'] });
});

test('states filter and are counted over what the other filters leave', async () => {
  const released = await createReleased(author, reviewer, documentOf('A released one'));
  const asked = await create(author, documentOf('An asked one', 2));
  await ask(author, asked.waveformId, asked.head!.revisionId);
  await create(author, documentOf('A draft', 3));
  const gone = await createReleased(author, reviewer, documentOf('A withdrawn one', 4));
  await withdrawing(reviewer, gone.waveformId, 1, 'Bad seam.').expect(200);

  const all = await list(author);
  expect(all.counts).toEqual({ all: 4, draft: 1, inReview: 1, released: 1, withdrawn: 1 });
  const withdrawn = await list(author, '?state=withdrawn');
  expect(withdrawn.counts).toEqual(all.counts);
  expect(withdrawn.items).toMatchObject([
    { title: 'A withdrawn one', withdrawnReason: 'Bad seam.', newestEdition: null, stamp: { editionNumber: 1 } },
  ]);
  expect((await list(author, '?state=released')).items[0]!.waveformId).toBe(released.waveformId);
  expect((await list(author, '?find=draft')).counts).toMatchObject({ all: 1, draft: 1, released: 0 });
  await author.get('/api/v1/waveforms?state=lost').expect(422);
});

test('finds a part of a title whatever the case, and the first digits of a digest', async () => {
  const waveform = await create(author, documentOf('Kerbe für Ähren'));
  await create(author, documentOf('Ladder', 2));
  expect(titles(await list(author, `?find=${encodeURIComponent('FÜR äh')}`))).toEqual(['Kerbe für Ähren']);
  const digits = waveform.head!.contentDigest.slice(7, 13);
  expect(titles(await list(author, `?find=${digits}`))).toEqual(['Kerbe für Ähren']);
  expect(titles(await list(author, `?find=sha256:${digits.toUpperCase()}`))).toEqual(['Kerbe für Ähren']);
  expect(titles(await list(author, '?find=notch%2040'))).toEqual([]);
});

test('an edition is found by its digest after others drew on', async () => {
  const { waveformId, revisionId, edition } = await createReleased(author, reviewer, documentOf('Old'));
  await save(author, waveformId, revisionId, documentOf('Old', 2));
  expect(titles(await list(author, `?find=${edition.contentDigest.slice(7, 15)}`))).toEqual(['Old']);
});

test("a vector's or a zip's digest finds its waveform; a draft's pack finds it for its author alone", async () => {
  const { benchId } = await createBench(await server.as('admin'), openBench());
  const { revisionId } = await createReleased(author, reviewer, documentOf('Played'));
  const played = await makePack(author, revisionId, benchId);
  const draft = await create(author, documentOf('Tried', 2));
  const tried = await makePack(author, draft.head!.revisionId, benchId);
  const foundBy = async (client: Client, digest: string) => titles(await list(client, `?find=${digest.slice(7, 19)}`));
  for (const client of [author, await server.as('operator')]) {
    expect(await foundBy(client, played.vectorDigest)).toEqual(['Played']);
    expect(await foundBy(client, played.fileDigest)).toEqual(['Played']);
  }
  expect(await foundBy(author, tried.vectorDigest)).toEqual(['Tried']);
  expect(await foundBy(await server.as('otherAuthor'), tried.vectorDigest)).toEqual([]);
});

test('mine are those in which I saved something', async () => {
  const other = await server.as('otherAuthor');
  const first = await create(author, documentOf('Shared'));
  await create(author, documentOf('Hers', 2));
  await save(other, first.waveformId, first.head!.revisionId, documentOf('Shared', 3));
  expect(titles(await list(other, '?mine=true'))).toEqual(['Shared']);
  expect(titles(await list(author, '?mine=true')).sort()).toEqual(['Hers', 'Shared']);
});

test('waits for your review: reviewers whom four eyes do not bar', async () => {
  grant(server, 'author', 'reviewer');
  const { waveformId, head } = await create(author, documentOf('Waiting'));
  await ask(author, waveformId, head!.revisionId);
  const waits = async (client: Client) => (await list(client)).items[0]!.waitsForYourReview;
  expect(await waits(reviewer)).toBe(true);
  expect(await waits(author)).toBe(false);
  expect(await waits(await server.as('otherAuthor'))).toBe(false);
});

test('who reads editions only sees the edition in place of the head, and no draft at all', async () => {
  const draft = await create(author, documentOf('Secret draft', 5));
  const { waveformId, revisionId } = await createReleased(author, reviewer, documentOf('Released name'));
  const saved = await save(author, waveformId, revisionId, documentOf('Secret name', 2));
  await ask(author, waveformId, saved.revision.revisionId, 'Secret note');

  const answer = await list(operator);
  expect(answer.counts.all).toBe(1);
  expect(answer.items[0]).toMatchObject({ title: 'Released name', revisionId, stamp: { state: 'released' } });
  const shown = await show(operator, waveformId);
  expect(shown).toMatchObject({ title: 'Released name', head: null, openReview: null });
  expect(shown.editions).toHaveLength(1);
  expect(JSON.stringify([answer, shown])).not.toMatch(/Secret/);
  expect((await open(operator, revisionId)).newer).toBeNull();
  expect(titles(await list(operator, '?find=Secret'))).toEqual([]);

  for (const path of [
    `/waveforms/${draft.waveformId}`,
    `/waveforms/${draft.waveformId}/revisions`,
    `/waveforms/${waveformId}/revisions`,
    `/waveforms/${waveformId}/review`,
    `/revisions/${saved.revision.revisionId}`,
    `/revisions/${saved.revision.revisionId}/document`,
    `/revisions/${saved.revision.revisionId}/figures`,
  ])
    expect((await operator.get(`/api/v1${path}`).expect(404)).body.code).toBe('not_found');
});

test('a withdrawn edition stays in sight of those who may have it on the bench, with its reason', async () => {
  const { waveformId } = await createReleased(author, reviewer, documentOf('On the bench'));
  await withdrawing(reviewer, waveformId, 1, 'Bad seam.').expect(200);
  expect((await list(operator)).items).toMatchObject([{ stamp: { state: 'withdrawn' }, withdrawnReason: 'Bad seam.' }]);
  expect((await show(operator, waveformId)).editions[0]!.withdrawn!.reason).toBe('Bad seam.');
});
