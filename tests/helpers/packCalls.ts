import type { Bench } from '@/lib/contracts/benches';
import type { PackDetail, PackJob } from '@/lib/contracts/packs';
import type { BenchProfile } from '@/lib/synth/index';
import type { Client } from './testServer';

export async function createBench(admin: Client, profile: BenchProfile): Promise<Bench> {
  return (await admin.post('/api/v1/benches', profile).expect(201)).body as Bench;
}

/** The request itself, for refusals. */
export function asking(client: Client, revisionId: string, benchId: string) {
  return client.post('/api/v1/packs', { revisionId, benchId });
}

export async function showJob(client: Client, jobId: string): Promise<PackJob> {
  return (await client.get(`/api/v1/pack-jobs/${jobId}`).expect(200)).body as PackJob;
}

const ended = ['done', 'failed', 'cancelled'];

export async function untilJob(
  client: Client,
  jobId: string,
  isReached: (job: PackJob) => boolean = (job) => ended.includes(job.state),
): Promise<PackJob> {
  for (let tries = 0; tries < 1500; tries++) {
    const job = await showJob(client, jobId);
    if (isReached(job)) return job;
    if (ended.includes(job.state)) throw new Error(`The job ended as ${job.state}: ${job.problem?.detail}`);
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
  throw new Error('The job did not get there.');
}

export async function showPack(client: Client, packId: string): Promise<PackDetail> {
  return (await client.get(`/api/v1/packs/${packId}`).expect(200)).body as PackDetail;
}

/** Asks, waits, and gives the pack. */
export async function makePack(client: Client, revisionId: string, benchId: string): Promise<PackDetail> {
  const asked = (await asking(client, revisionId, benchId).expect(202)).body as PackJob;
  const job = await untilJob(client, asked.jobId);
  if (job.packId === null) throw new Error(`No pack: ${job.problem?.detail}`);
  return showPack(client, job.packId);
}
