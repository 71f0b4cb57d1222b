import { demoSignIn, listDemoPeople, signOut } from '@/lib/contracts/auth';
import { createBench } from '@/lib/contracts/benches';
import { makePack, showPackJob } from '@/lib/contracts/packs';
import { askForReview, releaseRevision } from '@/lib/contracts/reviews';
import { createWaveform, showWaveform, type Waveform } from '@/lib/contracts/waveforms';
import { echoTest, paLadder, threeTones } from '@/lib/document/demoDocuments';
import { exampleBenches } from '@/lib/document/examples/exampleBenches';
import type { WaveformDocument } from '@/lib/synth';
import type { Deps } from '../../deps.ts';
import { findInstallation, markDemoReady } from '../auth/installationRepo.ts';
import { createOwnClient, type OwnAddress, type OwnClient } from './ownClient.ts';
import { seedDemoPeople } from './people.ts';

const POLL_MS = 100;

/**
 * Makes the demo team once: people in the tables, all else by their hands through the API, the pack by the real rendering.
 * Each making has a key, so that a start which was cut half-way goes on where it ended and makes nothing twice.
 */
export async function seedDemo(deps: Deps, address: OwnAddress): Promise<void> {
  const { store, clock } = deps;
  if (findInstallation(store.db)?.demoReadyAtMs) return;
  seedDemoPeople(deps);

  const [ines, tomas, mira, nora, jun] = await Promise.all(
    ['Ines Okoro', 'Tomas Vell', 'Mira Sand', 'Nora Quist', 'Jun Aldane'].map((name) => signIn(address, name)),
  );
  if (!ines || !tomas || !mira || !nora || !jun) throw new Error('the demo team is not whole');

  const benchIds: string[] = [];
  for (const { exampleId, build } of exampleBenches) {
    const bench = await mira.ask(createBench, { body: build(), idempotencyKey: `demo-${exampleId}` });
    benchIds.push(bench.benchId);
  }

  await create(ines, threeTones(), 'demo-three-tones');
  const waits = await create(tomas, echoTest(), 'demo-echo-test');
  await askOnce(tomas, waits, 'The prefix is 25 % of the symbol, so that the second echo stays inside it.');

  const ladder = await create(ines, paLadder(), 'demo-pa-ladder');
  if (ladder.editions.length === 0) {
    await askOnce(ines, ladder, 'The ladder for the amplifier bench. Notch at +5 MHz, tone below it.');
    await nora.ask(releaseRevision, {
      params: { waveformId: ladder.waveformId },
      body: { revisionId: headOf(ladder) },
    });
  }
  // The bench with marker outputs: the ladder has a frame marker.
  await makeWholePack(jun, headOf(ladder), benchIds[1] ?? '');

  await Promise.all([ines, tomas, mira, nora, jun].map((client) => client.ask(signOut)));
  store.write((tx) => markDemoReady(tx, clock.nowMs()));
}

async function signIn(address: OwnAddress, name: string): Promise<OwnClient> {
  const client = createOwnClient(address);
  const { people } = await client.ask(listDemoPeople);
  const person = people.find((candidate) => candidate.name === name);
  if (!person) throw new Error(`${name} is not in the demo team`);
  await client.ask(demoSignIn, { body: { personId: person.personId } });
  return client;
}

async function create(author: OwnClient, document: WaveformDocument, idempotencyKey: string): Promise<Waveform> {
  const { waveformId } = await author.ask(createWaveform, { body: document, idempotencyKey });
  // Asked anew: the answer to a retried making tells of now as well, but only this one is sure to.
  return author.ask(showWaveform, { params: { waveformId } });
}

function headOf({ head, title }: Waveform): string {
  if (!head) throw new Error(`${title} has no head`);
  return head.revisionId;
}

async function askOnce(author: OwnClient, waveform: Waveform, note: string): Promise<void> {
  if (waveform.openReview) return;
  const { waveformId } = waveform;
  await author.ask(askForReview, { params: { waveformId }, body: { revisionId: headOf(waveform), note } });
}

async function makeWholePack(operator: OwnClient, revisionId: string, benchId: string): Promise<void> {
  let job = await operator.ask(makePack, { body: { revisionId, benchId } });
  while (job.state === 'waiting' || job.state === 'running') {
    await new Promise((resolve) => setTimeout(resolve, POLL_MS));
    job = await operator.ask(showPackJob, { params: { jobId: job.jobId } });
  }
  if (job.state !== 'done') throw new Error(`the demo's pack ended as ${job.state}`);
}
