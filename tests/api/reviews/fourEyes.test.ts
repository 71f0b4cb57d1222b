import { grant } from '../../helpers/roles';
import { startTestServer, type Client, type TestServer } from '../../helpers/testServer';
import {
  ask,
  create,
  createReleased,
  documentOf,
  release,
  releasing,
  save,
  saving,
  show,
  withdrawing,
} from '../../helpers/waveformCalls';

// Ada and Otto draw and review, Rhea reviews alone.
let server: TestServer;
let ada: Client;
let otto: Client;
let rhea: Client;
beforeEach(async () => {
  server = await startTestServer();
  grant(server, 'author', 'reviewer');
  grant(server, 'otherAuthor', 'reviewer');
  ada = await server.as('author');
  otto = await server.as('otherAuthor');
  rhea = await server.as('reviewer');
});
afterEach(() => server.close());

async function refused(client: Client, waveformId: string, revisionId: string) {
  const answer = await releasing(client, waveformId, revisionId).expect(403);
  expect(answer.body.code).toBe('own_work');
  return answer.body.facts.releasableBy as { people: { name: string }[]; words: string | null };
}

test('nobody releases what they saved; somebody else does', async () => {
  const { waveformId, head } = await create(ada, documentOf('Own'));
  await ask(ada, waveformId, head!.revisionId);
  const who = await refused(ada, waveformId, head!.revisionId);
  expect(who.people.map((person) => person.name)).toEqual(['Otto Author', 'Rhea Reviewer']);
  expect((await show(ada, waveformId)).openReview!.releasableBy.you).toBe('ownWork');
  await release(otto, waveformId, head!.revisionId);
});

test('nor what they saved an ancestor of, also far back', async () => {
  const { waveformId, head } = await create(ada, documentOf('Line'));
  let parentId = head!.revisionId;
  for (const headroomDb of [2, 3, 4])
    parentId = (await save(otto, waveformId, parentId, documentOf('Line', headroomDb))).revision.revisionId;
  await ask(otto, waveformId, parentId);
  await refused(ada, waveformId, parentId);
  await refused(otto, waveformId, parentId);
  await release(rhea, waveformId, parentId);
});

test('the last edition ends the line: who drew what stands in it may release what others added', async () => {
  const { waveformId, revisionId } = await createReleased(ada, rhea, documentOf('Base'));
  const next = await save(otto, waveformId, revisionId, documentOf('Base', 2));
  await ask(otto, waveformId, next.revision.revisionId);
  await refused(otto, waveformId, next.revision.revisionId);
  await release(ada, waveformId, next.revision.revisionId);
});

test('a withdrawn edition does not end it', async () => {
  const { waveformId, revisionId } = await createReleased(ada, rhea, documentOf('Base'));
  await withdrawing(rhea, waveformId, 1).expect(200);
  const next = await save(otto, waveformId, revisionId, documentOf('Base', 2));
  await ask(otto, waveformId, next.revision.revisionId);
  await refused(ada, waveformId, next.revision.revisionId);
  await release(rhea, waveformId, next.revision.revisionId);
});

test('a copy goes on with its source, through more than one copy', async () => {
  const source = await create(ada, documentOf('Source'));
  const copy = await create(otto, documentOf('Copy', 2), source.head!.revisionId);
  const copyOfCopy = await create(otto, documentOf('Copy of a copy', 3), copy.head!.revisionId);
  await ask(otto, copyOfCopy.waveformId, copyOfCopy.head!.revisionId);
  await refused(ada, copyOfCopy.waveformId, copyOfCopy.head!.revisionId);
  await release(rhea, copyOfCopy.waveformId, copyOfCopy.head!.revisionId);
});

test('equal content elsewhere is own work: drawn twice, or saved under another name and other limits', async () => {
  await create(ada, documentOf('Hers'));
  const same = documentOf('His');
  const { waveformId, head } = await create(otto, { ...same, intent: { ...same.intent, lossDb: 20 } });
  await ask(otto, waveformId, head!.revisionId);
  await refused(ada, waveformId, head!.revisionId);
  await release(rhea, waveformId, head!.revisionId);
});

test('equal content that came later, or as a side revision, counts too', async () => {
  const { waveformId, head } = await create(otto, documentOf('Draft'));
  const second = await save(otto, waveformId, head!.revisionId, documentOf('Draft', 2));
  await ask(otto, waveformId, second.revision.revisionId);
  await saving(ada, waveformId, head!.revisionId, documentOf('Late', 2)).expect(409);
  await refused(ada, waveformId, second.revision.revisionId);
});

test('other content of the same person elsewhere is no bar', async () => {
  await create(ada, documentOf('Hers', 7));
  const { waveformId, head } = await create(otto, documentOf('His'));
  await ask(otto, waveformId, head!.revisionId);
  await release(ada, waveformId, head!.revisionId);
});

test('only a reviewer reviews: an author who did not draw it is refused by role', async () => {
  const plain = await startTestServer();
  const { waveformId, head } = await create(await plain.as('author'), documentOf('Role'));
  await ask(await plain.as('author'), waveformId, head!.revisionId);
  const answer = await releasing(await plain.as('otherAuthor'), waveformId, head!.revisionId).expect(403);
  expect(answer.body.code).toBe('action_forbidden');
  await plain.close();
});

test('a team whose reviewers all drew it is told who else is needed', async () => {
  const { waveformId, head } = await create(ada, documentOf('Few'));
  const second = await save(otto, waveformId, head!.revisionId, documentOf('Few', 2));
  grant(server, 'reviewer', 'author');
  const third = await save(rhea, waveformId, second.revision.revisionId, documentOf('Few', 3));
  const review = await ask(ada, waveformId, third.revision.revisionId);
  expect(review.releasableBy).toEqual({
    you: 'ownWork',
    people: [],
    words:
      'Ada Author, Otto Author and Rhea Reviewer are the reviewers and each drew a part of this. ' +
      'Somebody else with the reviewer role is needed; an admin can give it.',
  });
  const who = await refused(rhea, waveformId, third.revision.revisionId);
  expect(who.people).toEqual([]);
});

test('a team with one reviewer, who drew it, is told so', async () => {
  const small = await startTestServer();
  grant(small, 'reviewer', 'author');
  const only = await small.as('reviewer');
  const { waveformId, head } = await create(only, documentOf('Alone'));
  const review = await ask(only, waveformId, head!.revisionId);
  expect(review.releasableBy.words).toBe(
    'Rhea Reviewer is the only reviewer and drew a part of this. Somebody else with the reviewer role is needed; an admin can give it.',
  );
  await small.close();
});
