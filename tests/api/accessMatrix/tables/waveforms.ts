import type { Bench } from '@/lib/contracts/benches';
import type { AccessTable } from '../../../helpers/accessMatrix';
import { openBench } from '../../../helpers/documents';
import { grant } from '../../../helpers/roles';
import type { TestServer } from '../../../helpers/testServer';
import { ask, create, createReleased, documentOf, save, withdrawing } from '../../../helpers/waveformCalls';

interface Subject {
  waveformId: string;
  revisionId: string;
  benchId: string;
}

async function bench(server: TestServer): Promise<{ benchId: string }> {
  const admin = await server.as('admin');
  return { benchId: ((await admin.post('/api/v1/benches', openBench())).body as Bench).benchId };
}

/** Drawn by the author. */
async function draft(server: TestServer): Promise<Subject> {
  const { waveformId, head } = await create(await server.as('author'), documentOf('Drawn'));
  return { waveformId, revisionId: head!.revisionId, ...(await bench(server)) };
}

async function inReview(server: TestServer): Promise<Subject> {
  const subject = await draft(server);
  await ask(await server.as('author'), subject.waveformId, subject.revisionId);
  return subject;
}

async function released(server: TestServer): Promise<Subject> {
  const author = await server.as('author');
  const { waveformId, revisionId } = await createReleased(author, await server.as('reviewer'), documentOf('Drawn'));
  return { waveformId, revisionId, ...(await bench(server)) };
}

/** The author, who drew it, and the other author review as well. */
async function inReviewByAuthors(server: TestServer): Promise<Subject> {
  grant(server, 'author', 'reviewer');
  grant(server, 'otherAuthor', 'reviewer');
  return inReview(server);
}

async function withdrawn(server: TestServer): Promise<Subject> {
  const subject = await released(server);
  await withdrawing(await server.as('reviewer'), subject.waveformId, 1);
  return subject;
}

/** The head is a draft after edition 1; the request names the draft. */
async function draftOverEdition(server: TestServer): Promise<Subject> {
  const subject = await released(server);
  const saved = await save(await server.as('author'), subject.waveformId, subject.revisionId, documentOf('Drawn', 2));
  return { ...subject, revisionId: saved.revision.revisionId };
}

const waveform = ({ waveformId }: Subject) => ({ params: { waveformId } });
const revision = ({ revisionId }: Subject) => ({ params: { revisionId } });
const edition = ({ waveformId }: Subject) => ({ params: { waveformId, editionNumber: 1 } });
const review = (subject: Subject) => ({ ...waveform(subject), body: { revisionId: subject.revisionId } });
const withReason = (subject: Subject) => ({
  ...waveform(subject),
  body: { revisionId: subject.revisionId, reason: 'So.' },
});

export const waveformsAccess: AccessTable = {
  states: {
    draft,
    'in review': inReview,
    'in review, authors review too': inReviewByAuthors,
    released,
    withdrawn,
    'draft over edition': draftOverEdition,
  },
  requests: {
    listWaveforms: () => ({}),
    createWaveform: () => ({ body: documentOf('New', 3) }),
    showWaveform: waveform,
    listRevisions: waveform,
    saveRevision: (subject: Subject) => ({
      ...waveform(subject),
      query: { parentId: subject.revisionId },
      body: documentOf('Drawn', 9),
    }),
    showRevision: revision,
    showRevisionFigures: revision,
    exportDocument: revision,
    showFit: (subject: Subject) => ({ ...revision(subject), query: { benchId: subject.benchId } }),
    askForReview: (subject: Subject) => ({
      ...waveform(subject),
      body: { revisionId: subject.revisionId, note: '' },
    }),
    showReview: waveform,
    takeBackReview: withReason,
    returnRevision: withReason,
    releaseRevision: review,
    showEdition: edition,
    withdrawEdition: (subject: Subject) => ({ ...edition(subject), body: { reason: 'So.' } }),
  },
  table: `
    endpoint            | state                         | anonymous | author             | otherAuthor        | reviewer           | operator             | admin
    listWaveforms       | draft                         | 401       | 200                | 200                | 200                | 200                  | 200
    createWaveform      | -                             | 401       | 201                | 201                | 403                | 403                  | 403
    showWaveform        | draft                         | 401       | 200                | 200                | 200                | 404                  | 404
    showWaveform        | released                      | 401       | 200                | 200                | 200                | 200                  | 200
    showWaveform        | withdrawn                     | 401       | 200                | 200                | 200                | 200                  | 200
    listRevisions       | released                      | 401       | 200                | 200                | 200                | 404                  | 404
    saveRevision        | draft                         | 401       | 201                | 201                | 403                | 403                  | 403
    saveRevision        | in review                     | 401       | 201                | 201                | 403                | 403                  | 403
    saveRevision        | released                      | 401       | 201                | 201                | 403                | 403                  | 403
    saveRevision        | withdrawn                     | 401       | 201                | 201                | 403                | 403                  | 403
    showRevision        | draft                         | 401       | 200                | 200                | 200                | 404                  | 404
    showRevision        | in review                     | 401       | 200                | 200                | 200                | 404                  | 404
    showRevision        | released                      | 401       | 200                | 200                | 200                | 200                  | 200
    showRevision        | withdrawn                     | 401       | 200                | 200                | 200                | 200                  | 200
    showRevision        | draft over edition            | 401       | 200                | 200                | 200                | 404                  | 404
    showRevisionFigures | draft                         | 401       | 200                | 200                | 200                | 404                  | 404
    showRevisionFigures | released                      | 401       | 200                | 200                | 200                | 200                  | 200
    exportDocument      | draft                         | 401       | 200                | 200                | 200                | 404                  | 404
    exportDocument      | released                      | 401       | 200                | 200                | 200                | 200                  | 200
    showFit             | draft                         | 401       | 200                | 200                | 200                | 404                  | 404
    showFit             | released                      | 401       | 200                | 200                | 200                | 404                  | 404
    askForReview        | draft                         | 401       | 201                | 201                | 403                | 403                  | 403
    askForReview        | in review                     | 401       | 409 state_conflict | 409 state_conflict | 403                | 403                  | 403
    askForReview        | released                      | 401       | 409 state_conflict | 409 state_conflict | 403                | 403                  | 403
    askForReview        | withdrawn                     | 401       | 409 state_conflict | 409 state_conflict | 403                | 403                  | 403
    askForReview        | draft over edition            | 401       | 201                | 201                | 403                | 403                  | 403
    showReview          | in review                     | 401       | 200                | 200                | 200                | 404                  | 404
    takeBackReview      | in review                     | 401       | 200                | 200                | 403                | 403                  | 403
    takeBackReview      | draft                         | 401       | 409 state_conflict | 409 state_conflict | 403                | 403                  | 403
    returnRevision      | in review                     | 401       | 403                | 403                | 200                | 403                  | 403
    returnRevision      | draft                         | 401       | 403                | 403                | 409 state_conflict | 403                  | 403
    returnRevision      | released                      | 401       | 403                | 403                | 409 state_conflict | 403                  | 403
    releaseRevision     | in review                     | 401       | 403                | 403                | 201                | 403                  | 403
    releaseRevision     | in review, authors review too | 401       | 403 own_work       | 201                | 201                | 403                  | 403
    releaseRevision     | draft                         | 401       | 403                | 403                | 409 state_conflict | 403                  | 403
    releaseRevision     | released                      | 401       | 403                | 403                | 409 state_conflict | 403                  | 403
    releaseRevision     | withdrawn                     | 401       | 403                | 403                | 409 state_conflict | 403                  | 403
    showEdition         | draft                         | 401       | 404                | 404                | 404                | 404                  | 404
    showEdition         | released                      | 401       | 200                | 200                | 200                | 200                  | 200
    showEdition         | withdrawn                     | 401       | 200                | 200                | 200                | 200                  | 200
    withdrawEdition     | draft                         | 401       | 403                | 403                | 404                | 403                  | 404
    withdrawEdition     | released                      | 401       | 403                | 403                | 200                | 403 action_forbidden | 200
    withdrawEdition     | withdrawn                     | 401       | 403                | 403                | 409 state_conflict | 403                  | 409 state_conflict
  `,
};
