import type { EditionWithdrawn } from '@/server/events';
import { createEvents } from '@/server/events';
import { createEditionsService } from '@/server/features/editions/service';
import { startTestServer, type Client, type TestServer } from '../../helpers/testServer';
import {
  ask,
  create,
  createReleased,
  documentOf,
  open,
  release,
  releasing,
  save,
  show,
  withdrawing,
} from '../../helpers/waveformCalls';

let server: TestServer;
let author: Client;
let other: Client;
let reviewer: Client;
beforeEach(async () => {
  server = await startTestServer();
  author = await server.as('author');
  other = await server.as('otherAuthor');
  reviewer = await server.as('reviewer');
});
afterEach(() => server.close());

const returning = (client: Client, waveformId: string, revisionId: string, reason = 'Lower the pilots.') =>
  client.post(`/api/v1/waveforms/${waveformId}/review/return`, { revisionId, reason });
const takingBack = (client: Client, waveformId: string, revisionId: string, reason = 'Not yet.') =>
  client.post(`/api/v1/waveforms/${waveformId}/review/take-back`, { revisionId, reason });
const asking = (client: Client, waveformId: string, revisionId: string) =>
  client.post(`/api/v1/waveforms/${waveformId}/review`, { revisionId, note: '' });

test('any author asks, with a note; the request names who may release', async () => {
  const { waveformId, head } = await create(author, documentOf('Ladder'));
  const review = await ask(other, waveformId, head!.revisionId, 'Peak is 9.5 dB now.');
  expect(review).toMatchObject({
    revisionNumber: 1,
    note: 'Peak is 9.5 dB now.',
    askedBy: { name: 'Otto Author' },
    nextEditionNumber: 1,
    newer: null,
    releasableBy: { you: 'notReviewer', people: [{ name: 'Rhea Reviewer' }], words: null },
  });
  const shown = await show(reviewer, waveformId);
  expect(shown.head!.stamp).toMatchObject({ state: 'inReview', reason: 'Peak is 9.5 dB now.' });
  expect(shown.openReview!.releasableBy.you).toBe('yes');
});

test('one open request a waveform, and only a draft can be asked for', async () => {
  const { waveformId, head } = await create(author, documentOf('Once'));
  const second = await save(author, waveformId, head!.revisionId, documentOf('Once', 2));
  await ask(author, waveformId, head!.revisionId);
  const refused = await asking(other, waveformId, second.revision.revisionId).expect(409);
  expect(refused.body).toMatchObject({ code: 'state_conflict', facts: { openRevisionId: head!.revisionId } });
  await release(reviewer, waveformId, head!.revisionId);
  const released = await asking(author, waveformId, head!.revisionId).expect(409);
  expect(released.body.facts.state).toBe('released');
  await ask(author, waveformId, second.revision.revisionId);
});

test('returned with a reason it is a draft that carries the reason, and may be asked for again', async () => {
  const { waveformId, head } = await create(author, documentOf('Returned'));
  const revisionId = head!.revisionId;
  await ask(author, waveformId, revisionId);
  await returning(reviewer, waveformId, revisionId, '').expect(422);
  const returned = await returning(reviewer, waveformId, revisionId).expect(200);
  expect(returned.body.stamp).toMatchObject({
    state: 'draft',
    reason: 'Lower the pilots.',
    cameBack: 'returned',
    by: { name: 'Rhea Reviewer' },
  });
  expect((await show(author, waveformId)).openReview).toBeNull();
  await ask(author, waveformId, revisionId);
  expect((await open(author, revisionId)).revision.stamp).toMatchObject({ state: 'inReview', cameBack: null });
});

test('any author takes a request back with a reason; a reviewer alone cannot', async () => {
  const { waveformId, head } = await create(author, documentOf('Back'));
  await ask(author, waveformId, head!.revisionId);
  await takingBack(reviewer, waveformId, head!.revisionId).expect(403);
  const back = await takingBack(other, waveformId, head!.revisionId).expect(200);
  expect(back.body.stamp).toMatchObject({ state: 'draft', cameBack: 'takenBack', reason: 'Not yet.' });
});

test('saving while in review makes a new draft; the request stays and says so', async () => {
  const { waveformId, head } = await create(author, documentOf('Busy'));
  await ask(author, waveformId, head!.revisionId);
  const saved = await save(other, waveformId, head!.revisionId, documentOf('Busy', 2));
  expect(saved.revision.stamp.state).toBe('draft');
  expect(saved.openReview).toMatchObject({
    revisionId: head!.revisionId,
    newer: { number: 2, savedBy: { name: 'Otto Author' } },
  });
  const edition = await release(reviewer, waveformId, head!.revisionId);
  expect(edition.revisionNumber).toBe(1);
  const shown = await show(author, waveformId);
  expect(shown.head).toMatchObject({ number: 2, stamp: { state: 'draft' } });
  expect(shown.openReview).toBeNull();
});

test('nothing but a revision in review is released, returned or taken back', async () => {
  const { waveformId, head } = await create(author, documentOf('Conflict'));
  const first = head!.revisionId;
  for (const attempt of [releasing, returning]) {
    const refused = await attempt(reviewer, waveformId, first).expect(409);
    expect(refused.body).toMatchObject({ code: 'state_conflict', facts: { state: 'draft', openRevisionId: null } });
  }
  await takingBack(author, waveformId, first).expect(409);
  // the reviewer looked at another revision than the one in review
  const second = await save(author, waveformId, first, documentOf('Conflict', 2));
  await ask(author, waveformId, second.revision.revisionId);
  const wrong = await releasing(reviewer, waveformId, first).expect(409);
  expect(wrong.body.facts.openRevisionId).toBe(second.revision.revisionId);
  await release(reviewer, waveformId, second.revision.revisionId);
  const twice = await releasing(reviewer, waveformId, second.revision.revisionId).expect(409);
  expect(twice.body.facts.state).toBe('released');
});

test('an edition keeps its title and number; numbers go on after a withdrawal', async () => {
  const { waveformId, revisionId, edition } = await createReleased(author, reviewer, documentOf('Old name'));
  expect(edition).toMatchObject({ number: 1, title: 'Old name', withdrawn: null });
  const renamed = await save(author, waveformId, revisionId, documentOf('New name', 2));
  expect((await show(author, waveformId)).editions[0]!.title).toBe('Old name');
  const withdrawn = await withdrawing(reviewer, waveformId, 1).expect(200);
  expect(withdrawn.body.withdrawn).toMatchObject({ reason: 'It splatters.', by: { name: 'Rhea Reviewer' } });
  await ask(author, waveformId, renamed.revision.revisionId);
  const second = await release(reviewer, waveformId, renamed.revision.revisionId);
  expect(second.number).toBe(2);
  const again = await withdrawing(reviewer, waveformId, 1).expect(409);
  expect(again.body).toMatchObject({ code: 'state_conflict', facts: { state: 'withdrawn' } });
});

test('withdrawn is for ever: it cannot be asked for, and drawing on from it is a new draft', async () => {
  const { waveformId, revisionId } = await createReleased(author, reviewer, documentOf('Gone'));
  await withdrawing(await server.as('admin'), waveformId, 1, 'Wrong guard.').expect(200);
  const refused = await asking(author, waveformId, revisionId).expect(409);
  expect(refused.body.facts.state).toBe('withdrawn');
  const next = await save(author, waveformId, revisionId, documentOf('Gone', 2));
  expect(next.revision.stamp.state).toBe('draft');
  expect((await open(author, revisionId)).revision.stamp).toMatchObject({
    state: 'withdrawn',
    editionNumber: 1,
    reason: 'Wrong guard.',
    by: { name: 'Alan Admin' },
  });
});

test('a withdrawal is told to those who listen, once it is stored, and a listener that fails stops no other', async () => {
  const { waveformId, revisionId } = await createReleased(author, reviewer, documentOf('Listened'));
  const failed: unknown[] = [];
  const events = createEvents((error) => failed.push(error));
  const heard: EditionWithdrawn[] = [];
  events.editionWithdrawn.listen(() => {
    throw new Error('deaf');
  });
  const leave = events.editionWithdrawn.listen((event) => {
    const rows = server.store.sqlite.prepare('select count(*) as n from withdrawals').get() as { n: number };
    expect(rows.n).toBe(1);
    heard.push(event);
  });
  createEditionsService(server.deps, events).withdraw(server.actor('reviewer'), waveformId, 1, 'Heard.', null);
  expect(heard).toEqual([
    { waveformId, revisionId, editionNumber: 1, reason: 'Heard.', editionId: expect.stringMatching(/^\w{26}$/) },
  ]);
  expect(failed).toHaveLength(1);
  leave();
  events.editionWithdrawn.emit(heard[0]!);
  expect(heard).toHaveLength(1);
});

test('the order of transitions is theirs, whatever the clock does', async () => {
  const { waveformId, head } = await create(author, documentOf('Clock'));
  await ask(author, waveformId, head!.revisionId);
  server.clock.advance(-3_600_000);
  await returning(reviewer, waveformId, head!.revisionId).expect(200);
  server.clock.advance(-3_600_000);
  await ask(author, waveformId, head!.revisionId);
  expect((await open(author, head!.revisionId)).revision.stamp.state).toBe('inReview');
});

test('every transition stands in the audit with its person', async () => {
  const { waveformId, head } = await create(author, documentOf('Audit'));
  const revisionId = head!.revisionId;
  await ask(author, waveformId, revisionId);
  await returning(reviewer, waveformId, revisionId).expect(200);
  await ask(author, waveformId, revisionId);
  await takingBack(other, waveformId, revisionId).expect(200);
  await ask(author, waveformId, revisionId);
  await release(reviewer, waveformId, revisionId);
  await withdrawing(await server.as('admin'), waveformId, 1).expect(200);
  const rows = server.store.sqlite
    .prepare(
      `select act, name from audit join users on users.id = person_id
       where object_kind in ('revision', 'edition') order by seq`,
    )
    .all();
  expect(rows).toEqual([
    { act: 'revision.asked', name: 'Ada Author' },
    { act: 'revision.returned', name: 'Rhea Reviewer' },
    { act: 'revision.asked', name: 'Ada Author' },
    { act: 'revision.takenBack', name: 'Otto Author' },
    { act: 'revision.asked', name: 'Ada Author' },
    { act: 'revision.released', name: 'Rhea Reviewer' },
    { act: 'edition.withdrawn', name: 'Alan Admin' },
  ]);
});
