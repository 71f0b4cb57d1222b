import { mkdirSync, mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { findEditionOfRevision } from '@/server/revisions/editionRepo';
import { findProfileVersion, insertJob, insertPack } from '@/server/features/packs/repo';
import { makePack } from '@/server/packs/makePack';
import type { MadePack } from '@/server/packs/packTypes';
import type { AccessTable } from '../../../helpers/accessMatrix';
import { openBench } from '../../../helpers/documents';
import { createBench } from '../../../helpers/packCalls';
import type { TestServer } from '../../../helpers/testServer';
import { create, createReleased, documentOf, withdrawing } from '../../../helpers/waveformCalls';

interface Subject {
  waveformId: string;
  revisionId: string;
  benchId: string;
}
interface Made extends Subject {
  packId: string;
  jobId: string;
}

const document = documentOf('Drawn');

/** One real pack for all cells: who may see it does not hang on its bytes. */
let once: Promise<{ pack: MadePack; bytes: Buffer }> | undefined;
async function anyPack() {
  const folder = mkdtempSync(path.join(tmpdir(), 'matrix-'));
  const outFile = () => path.join(folder, 'pack.zip');
  const result = await makePack({ document, profile: openBench(), state: 'draft', tmpFolder: folder, outFile });
  if (!result.ok) throw new Error(result.message);
  return { pack: result.pack, bytes: readFileSync(result.pack.file) };
}

/** A stored pack with its file, and a job that waits for another one, as the author (or for an edition the operator) asked. */
async function withPack(server: TestServer, subject: Subject): Promise<Made> {
  const { pack, bytes } = await (once ??= anyPack());
  const edition = findEditionOfRevision(server.store.db, subject.revisionId);
  const profileVersionId = findProfileVersion(server.store.db, subject.benchId, undefined)!.id;
  const storedPath = path.join('packs', 'any.zip');
  mkdirSync(path.join(server.dataDir, 'packs'), { recursive: true });
  writeFileSync(path.join(server.dataDir, storedPath), bytes);
  const packId = server.deps.newId();
  const jobId = server.deps.newId();
  const of = { revisionId: subject.revisionId, editionId: edition?.id ?? null, profileVersionId, packKey: 'any' };
  const personId = server.personId(edition ? 'operator' : 'author');
  const atMs = server.clock.nowMs();
  server.store.write((tx) => {
    const { fileName, fileBytes, fileSha256, vectorSha256, manifestText: manifestJson } = pack;
    const stored = { storedPath, fileName, fileBytes, fileSha256, vectorSha256, manifestJson };
    insertPack(tx, { id: packId, ...of, ...stored, madeBy: personId, madeAtMs: atMs });
    insertJob(tx, { id: jobId, ...of, askedBy: personId, state: 'waiting', createdAtMs: atMs });
  });
  return { ...subject, packId, jobId };
}

async function drawn(server: TestServer): Promise<Subject> {
  const { waveformId, head } = await create(await server.as('author'), document);
  const { benchId } = await createBench(await server.as('admin'), openBench());
  return { waveformId, revisionId: head!.revisionId, benchId };
}

async function releasedSubject(server: TestServer): Promise<Subject> {
  const { waveformId, revisionId } = await createReleased(
    await server.as('author'),
    await server.as('reviewer'),
    document,
  );
  const { benchId } = await createBench(await server.as('admin'), openBench());
  return { waveformId, revisionId, benchId };
}

const draft = async (server: TestServer) => withPack(server, await drawn(server));
const released = async (server: TestServer) => withPack(server, await releasedSubject(server));
const withdrawn = async (server: TestServer) => {
  const made = await released(server);
  await withdrawing(await server.as('reviewer'), made.waveformId, 1);
  return made;
};

const pack = ({ packId }: Made) => ({ params: { packId } });
const job = ({ jobId }: Made) => ({ params: { jobId } });
const card = {
  deviceName: 'Other device',
  intent: { outputRmsDbm: null, lossDb: 0, devicePeakLimitDbm: 0, deviceMeanLimitDbm: null, levelToleranceDb: 1 },
} as const;

export const packsAccess: AccessTable = {
  states: { draft, released, withdrawn },
  requests: {
    makePack: ({ revisionId, benchId }: Made) => ({ body: { revisionId, benchId } }),
    listPacks: () => ({}),
    showPack: pack,
    downloadPack: pack,
    enterDeviceCard: (made: Made) => ({ ...pack(made), body: card }),
    listPackJobs: () => ({}),
    showPackJob: job,
    cancelPackJob: job,
  },
  // The author drew it. A draft's job was asked by the author, an edition's by the operator.
  table: `
    endpoint        | state     | anonymous | author                | otherAuthor           | reviewer              | operator              | admin
    makePack        | draft     | 401       | 202                   | 403 action_forbidden  | 403 action_forbidden  | 404                   | 404
    makePack        | released  | 401       | 202                   | 202                   | 202                   | 202                   | 202
    makePack        | withdrawn | 401       | 409 edition_withdrawn | 409 edition_withdrawn | 409 edition_withdrawn | 409 edition_withdrawn | 409 edition_withdrawn
    listPacks       | -         | 401       | 200                   | 200                   | 200                   | 200                   | 200
    showPack        | draft     | 401       | 200                   | 404                   | 404                   | 404                   | 404
    showPack        | released  | 401       | 200                   | 200                   | 200                   | 200                   | 200
    showPack        | withdrawn | 401       | 200                   | 200                   | 200                   | 200                   | 200
    downloadPack    | draft     | 401       | 200                   | 404                   | 404                   | 404                   | 404
    downloadPack    | released  | 401       | 200                   | 200                   | 200                   | 200                   | 200
    downloadPack    | withdrawn | 401       | 409 edition_withdrawn | 409 edition_withdrawn | 409 edition_withdrawn | 409 edition_withdrawn | 409 edition_withdrawn
    enterDeviceCard | draft     | 401       | 201                   | 404                   | 404                   | 404                   | 404
    enterDeviceCard | released  | 401       | 201                   | 201                   | 201                   | 201                   | 201
    enterDeviceCard | withdrawn | 401       | 409 edition_withdrawn | 409 edition_withdrawn | 409 edition_withdrawn | 409 edition_withdrawn | 409 edition_withdrawn
    listPackJobs    | -         | 401       | 200                   | 200                   | 200                   | 200                   | 200
    showPackJob     | draft     | 401       | 200                   | 404                   | 404                   | 404                   | 404
    showPackJob     | released  | 401       | 200                   | 200                   | 200                   | 200                   | 200
    cancelPackJob   | draft     | 401       | 200                   | 404                   | 404                   | 404                   | 404
    cancelPackJob   | released  | 401       | 403 action_forbidden  | 403 action_forbidden  | 403 action_forbidden  | 200                   | 200
  `,
};
