import { expect, type APIRequestContext } from '@playwright/test';
import { listPacks, type Pack } from '@/lib/contracts/packs';
import { listWaveforms, type WaveformItem } from '@/lib/contracts/waveforms';
import { ask } from './api.ts';

/** Titles of the demo's waveforms, by the state that the seed leaves them in. */
export const DEMO_TITLES = { draft: 'Front end', inReview: 'Echo test', released: 'PA ladder' } as const;

/** A demo waveform as the asking person sees it. */
export async function demoWaveform(
  request: APIRequestContext,
  origin: string,
  which: keyof typeof DEMO_TITLES,
): Promise<WaveformItem> {
  const { items } = await ask(request, origin, listWaveforms, { query: {} });
  const found = items.find((item) => item.title.startsWith(DEMO_TITLES[which]) && item.stamp.state === which);
  expect(found, `${DEMO_TITLES[which]} among ${items.map((item) => item.title).join(', ')}`).toBeDefined();
  return found!;
}

/** The pack that the seed rendered. */
export async function demoPack(request: APIRequestContext, origin: string): Promise<Pack> {
  const { items } = await ask(request, origin, listPacks, { query: {} });
  const found = items.find((pack) => pack.title.startsWith(DEMO_TITLES.released) && pack.state === 'released');
  expect(found).toBeDefined();
  return found!;
}
