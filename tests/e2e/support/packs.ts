import { expect, type APIRequestContext } from '@playwright/test';
import { makePack, showPack, showPackJob, type PackDetail } from '@/lib/contracts/packs';
import { ask } from './api.ts';

/** Asks for a pack, waits until it is proven, and gives it. */
export async function makeWholePack(
  request: APIRequestContext,
  origin: string,
  revisionId: string,
  benchId: string,
): Promise<PackDetail> {
  const { jobId } = await ask(request, origin, makePack, { body: { revisionId, benchId } });
  const show = () => ask(request, origin, showPackJob, { params: { jobId } });
  await expect.poll(async () => (await show()).state, { timeout: 60_000 }).toMatch(/^(done|failed|cancelled)$/);
  const job = await show();
  expect(job.problem, 'the pack was made').toBeNull();
  return ask(request, origin, showPack, { params: { packId: job.packId! } });
}
