import { gzipSync } from 'node:zlib';
import { staleFactsSchema, type SaveAnswer } from '@/lib/contracts/waveforms';
import { contentDigest, documentDigest, intentDigest } from '@/lib/document/digest';
import { startTestServer, type Client, type TestServer } from '../../helpers/testServer';
import { create, documentOf, open, save, saving, show } from '../../helpers/waveformCalls';

let server: TestServer;
let author: Client;
let other: Client;
beforeEach(async () => {
  server = await startTestServer();
  author = await server.as('author');
  other = await server.as('otherAuthor');
});
afterEach(() => server.close());

const rowsIn = (table: string) =>
  (server.store.sqlite.prepare(`select count(*) as n from ${table}`).get() as { n: number }).n;

test('a new waveform begins with revision 1, a draft of its author, under its digests', async () => {
  const document = documentOf('Notch 40');
  const waveform = await create(author, document);
  expect(waveform).toMatchObject({ title: 'Notch 40', source: null, editions: [], openReview: null });
  expect(waveform.head).toMatchObject({
    number: 1,
    parentId: null,
    isHead: true,
    isSide: false,
    contentDigest: contentDigest(document.content),
    intentDigest: intentDigest(document.intent),
    documentDigest: documentDigest(document),
    savedBy: { name: 'Ada Author' },
    stamp: { state: 'draft', editionNumber: null, reason: null },
  });
  expect((await open(author, waveform.head!.revisionId)).document).toEqual(document);
});

test('a save takes the next number, becomes head and gives the waveform its title', async () => {
  const waveform = await create(author, documentOf('First'));
  const saved = await save(other, waveform.waveformId, waveform.head!.revisionId, documentOf('Second', 2));
  expect(saved).toMatchObject({ isUnchanged: false, newer: null, openReview: null });
  expect(saved.revision).toMatchObject({ number: 2, parentId: waveform.head!.revisionId, isHead: true });
  expect(saved.revision.savedBy.name).toBe('Otto Author');
  const shown = await show(author, waveform.waveformId);
  expect(shown.title).toBe('Second');
  expect(shown.head!.revisionId).toBe(saved.revision.revisionId);
  expect((await open(author, waveform.head!.revisionId)).newer).toMatchObject({ number: 2 });
});

test('equal content, intent and about add nothing; a new note or limit alone is a revision over the same stored content', async () => {
  const document = documentOf('Same');
  const waveform = await create(author, document);
  const parentId = waveform.head!.revisionId;
  const again = await save(other, waveform.waveformId, parentId, document);
  expect(again).toMatchObject({ isUnchanged: true, revision: { revisionId: parentId, number: 1 } });
  expect(rowsIn('revisions')).toBe(1);

  const noted = { ...document, about: { ...document.about, notes: 'For the ladder.' } };
  const second = await save(author, waveform.waveformId, parentId, noted);
  const limited = { ...noted, intent: { ...noted.intent, devicePeakLimitDbm: 10 } };
  const third = await save(author, waveform.waveformId, second.revision.revisionId, limited);
  expect(third.revision.number).toBe(3);
  expect(third.revision.contentDigest).toBe(waveform.head!.contentDigest);
  expect(rowsIn('contents')).toBe(1);
});

test('a late save is refused with who was first, and kept beside the head', async () => {
  const waveform = await create(author, documentOf('Base'));
  const parentId = waveform.head!.revisionId;
  const first = await save(author, waveform.waveformId, parentId, documentOf('Base', 2));
  const refused = await saving(other, waveform.waveformId, parentId, documentOf('Mine', 3)).expect(409);
  expect(refused.body.code).toBe('stale_revision');
  const facts = staleFactsSchema.parse(refused.body.facts);
  expect(facts.newer).toMatchObject({ revisionId: first.revision.revisionId, number: 2 });
  expect(facts.newer.savedBy.name).toBe('Ada Author');
  expect(facts.kept).toMatchObject({ number: 3, savedBy: { name: 'Otto Author' } });

  const kept = await open(author, facts.kept.revisionId);
  expect(kept.document).toEqual(documentOf('Mine', 3));
  expect(kept.revision).toMatchObject({ isSide: true, isHead: false, parentId });
  expect(kept.newer).toMatchObject({ number: 2 });
  const shown = await show(author, waveform.waveformId);
  expect(shown).toMatchObject({ title: 'Base', head: { number: 2 } });

  // the next save on the main line steps over the side revision's number
  const next = await save(author, waveform.waveformId, first.revision.revisionId, documentOf('Base', 4));
  expect(next.revision.number).toBe(4);
});

test('a late save sent again is kept once; saved after a side revision it is late again', async () => {
  const waveform = await create(author, documentOf('Base'));
  const parentId = waveform.head!.revisionId;
  await save(author, waveform.waveformId, parentId, documentOf('Base', 2));
  const late = documentOf('Mine', 3);
  const once = await saving(other, waveform.waveformId, parentId, late).expect(409);
  const twice = await saving(other, waveform.waveformId, parentId, late).expect(409);
  expect(twice.body.facts.kept.revisionId).toBe(once.body.facts.kept.revisionId);
  const sideId = once.body.facts.kept.revisionId as string;
  const third = await saving(other, waveform.waveformId, sideId, documentOf('Mine', 4)).expect(409);
  expect(third.body.facts.kept.number).toBe(4);
});

test('two tabs of one author: the second one to save is told of the first, and both are kept', async () => {
  const waveform = await create(author, documentOf('Tabs'));
  const parentId = waveform.head!.revisionId;
  const otherTab = await server.as('author');
  const [one, two] = await Promise.all([
    saving(author, waveform.waveformId, parentId, documentOf('Tabs', 2)),
    saving(otherTab, waveform.waveformId, parentId, documentOf('Tabs', 3)),
  ]);
  expect([one.status, two.status].sort()).toEqual([201, 409]);
  const late = one.status === 409 ? one : two;
  expect(late.body.facts.newer.savedBy.name).toBe('Ada Author');
  const list = await author.get(`/api/v1/waveforms/${waveform.waveformId}/revisions`).expect(200);
  expect(list.body.revisions.map((r: { number: number; isHead: boolean }) => [r.number, r.isHead])).toEqual([
    [3, false],
    [2, true],
    [1, false],
  ]);
});

test('a retry with the same Idempotency-Key answers the same revision, also when it was late', async () => {
  const waveform = await create(author, documentOf('Retry'));
  const parentId = waveform.head!.revisionId;
  const send = (document: unknown, key: string) =>
    saving(author, waveform.waveformId, parentId, document).set('Idempotency-Key', key);
  const first = (await send(documentOf('Retry', 2), 'key-number-1').expect(201)).body as SaveAnswer;
  const retried = (await send(documentOf('Retry', 2), 'key-number-1').expect(201)).body as SaveAnswer;
  expect(retried.revision.revisionId).toBe(first.revision.revisionId);
  // still the same after others went on
  await save(other, waveform.waveformId, first.revision.revisionId, documentOf('Retry', 5));
  const later = (await send(documentOf('Retry', 2), 'key-number-1').expect(201)).body as SaveAnswer;
  expect(later).toMatchObject({ revision: { revisionId: first.revision.revisionId }, newer: { number: 3 } });
  const late = await send(documentOf('Retry', 3), 'key-number-2').expect(409);
  const lateAgain = await send(documentOf('Retry', 3), 'key-number-2').expect(409);
  expect(lateAgain.body.facts.kept).toEqual(late.body.facts.kept);
  expect(rowsIn('revisions')).toBe(4);
  // the key names one request
  const misused = await send(documentOf('Retry', 4), 'key-number-1').expect(409);
  expect(misused.body.code).toBe('state_conflict');
});

test('keys are forgotten after a week, so that autosaves leave no heap', async () => {
  const keyed = (title: string) =>
    author.post('/api/v1/waveforms', documentOf(title)).set('Idempotency-Key', `key-${title}`);
  await keyed('first').expect(201);
  server.clock.advance(6 * 24 * 3_600_000);
  author = await server.as('author'); // the session ended meanwhile
  await keyed('second').expect(201);
  expect(rowsIn('idempotency_keys')).toBe(2);
  server.clock.advance(2 * 24 * 3_600_000);
  author = await server.as('author');
  await keyed('third').expect(201);
  expect(rowsIn('idempotency_keys')).toBe(2);
});

test('a retried creation makes one waveform; the same key of another person is another key', async () => {
  const post = (client: Client) =>
    client.post('/api/v1/waveforms', documentOf('Once')).set('Idempotency-Key', 'create-once');
  const first = (await post(author).expect(201)).body;
  const again = (await post(author).expect(201)).body;
  expect(again.waveformId).toBe(first.waveformId);
  const others = (await post(other).expect(201)).body;
  expect(others.waveformId).not.toBe(first.waveformId);
});

test('a gzip body is a body', async () => {
  const document = documentOf('Gzip');
  const answer = await author
    .post('/api/v1/waveforms')
    .set('Content-Type', 'application/json')
    .set('Content-Encoding', 'gzip')
    .serialize((value: unknown) => value as string)
    .send(gzipSync(JSON.stringify(document)) as unknown as string)
    .expect(201);
  expect(answer.body.title).toBe('Gzip');
});

test('a wrong document is refused with pointers, and nothing is stored', async () => {
  const wrong = documentOf('Wrong');
  wrong.content.grid.rows[0]![0] = 7;
  const refused = await author.post('/api/v1/waveforms', wrong).expect(422);
  expect(refused.body.code).toBe('invalid');
  expect(refused.body.issues[0].pointer).toMatch(/^\/content\/grid/);
  expect(rowsIn('waveforms')).toBe(0);
  expect(rowsIn('contents')).toBe(0);
});

test('the parent must be a revision of the same waveform', async () => {
  const one = await create(author, documentOf('One'));
  const two = await create(author, documentOf('Two', 2));
  const refused = await saving(author, one.waveformId, two.head!.revisionId, documentOf('One', 3)).expect(422);
  expect(refused.body.issues[0].pointer).toBe('/query/parentId');
  await saving(author, two.head!.revisionId, two.head!.revisionId, documentOf('One', 3)).expect(404);
});

test('a copy names its source, and a source that is not there is refused', async () => {
  const source = await create(author, documentOf('Source'));
  const copy = await create(other, documentOf('Copy'), source.head!.revisionId);
  expect(copy.source).toEqual({ waveformId: source.waveformId, revisionId: source.head!.revisionId });
  expect(copy.head).toMatchObject({ number: 1, parentId: source.head!.revisionId });
  await other.post('/api/v1/waveforms?sourceRevisionId=01ARZ3NDEKTSV4RRFFQ69G5FAV', documentOf('X')).expect(404);
});

test('numbers keep their order when the clock jumps back', async () => {
  const waveform = await create(author, documentOf('Clock'));
  const ids = [waveform.head!.revisionId];
  for (const [step, headroomDb] of [
    [-3_600_000, 2],
    [10, 3],
    [-86_400_000, 4],
  ] as const) {
    server.clock.advance(step);
    const saved = await save(author, waveform.waveformId, ids.at(-1)!, documentOf('Clock', headroomDb));
    ids.push(saved.revision.revisionId);
  }
  const list = await author.get(`/api/v1/waveforms/${waveform.waveformId}/revisions`).expect(200);
  expect(list.body.revisions.map((r: { revisionId: string }) => r.revisionId)).toEqual([...ids].reverse());
  expect([...ids].sort()).toEqual(ids);
  expect((await show(author, waveform.waveformId)).head!.number).toBe(4);
});

test('each save stands in the audit', async () => {
  const waveform = await create(author, documentOf('Audited'));
  const parentId = waveform.head!.revisionId;
  await save(author, waveform.waveformId, parentId, documentOf('Audited', 2));
  await saving(other, waveform.waveformId, parentId, documentOf('Audited', 3)).expect(409);
  const acts = server.store.sqlite
    .prepare(
      "select act, object_label as label from audit where act like 'waveform.%' or act like 'revision.%' order by seq",
    )
    .all();
  expect(acts).toEqual([
    { act: 'waveform.created', label: 'Audited' },
    { act: 'revision.saved', label: 'Audited, revision 2' },
    { act: 'revision.keptAside', label: 'Audited, revision 3' },
  ]);
});

test('exporting gives the document as a file that is the document', async () => {
  const document = documentOf('Für den Prüfstand');
  const waveform = await create(author, document);
  const answer = await author.get(`/api/v1/revisions/${waveform.head!.revisionId}/document`).expect(200);
  expect(answer.headers['content-type']).toMatch(/^application\/json/);
  const digits = documentDigest(document).slice(7, 15);
  expect(answer.headers['content-disposition']).toBe(
    `attachment; filename="fu-r-den-pru-fstand-r1-${digits}.combwright.json"`,
  );
  expect(Object.keys(answer.body)).toEqual(['format', 'version', 'about', 'content', 'intent']);
  expect(answer.body).toEqual(document);
});
