import { emptyDocument } from '@/lib/document/newDocument';
import type { Edition, OpenReview } from '@/lib/contracts/reviews';
import { openedRevisionSchema, type OpenedRevision, type SaveAnswer, type Waveform } from '@/lib/contracts/waveforms';
import type { WaveformContent, WaveformDocument } from '@/lib/synth/index';
import { smallDocument } from './documents';
import type { Client } from './testServer';

/** A document told apart from others by its headroom, which is part of the content. */
export function documentOf(title: string, headroomDb = 1, content: Partial<WaveformContent> = {}): WaveformDocument {
  const document = smallDocument({ level: { reference: 'interpolatedPeak', headroomDb }, ...content });
  return { ...document, about: { ...document.about, title } };
}

export const bareDocument = (title: string): WaveformDocument => emptyDocument({ title });

export async function create(client: Client, document: WaveformDocument, sourceRevisionId?: string): Promise<Waveform> {
  const query = sourceRevisionId ? `?sourceRevisionId=${sourceRevisionId}` : '';
  const answer = await client.post(`/api/v1/waveforms${query}`, document).expect(201);
  return answer.body as Waveform;
}

export async function save(
  client: Client,
  waveformId: string,
  parentId: string,
  document: WaveformDocument,
): Promise<SaveAnswer> {
  const answer = await saving(client, waveformId, parentId, document).expect(201);
  return answer.body as SaveAnswer;
}

/** The request itself, for keys, refusals and headers. */
export function saving(client: Client, waveformId: string, parentId: string, document: unknown) {
  return client.post(`/api/v1/waveforms/${waveformId}/revisions?parentId=${parentId}`, document as object);
}

export async function show(client: Client, waveformId: string): Promise<Waveform> {
  return (await client.get(`/api/v1/waveforms/${waveformId}`).expect(200)).body as Waveform;
}

export async function open(client: Client, revisionId: string): Promise<OpenedRevision> {
  // written by hand on the server, so its shape is checked here
  return openedRevisionSchema.strict().parse((await client.get(`/api/v1/revisions/${revisionId}`).expect(200)).body);
}

export async function ask(client: Client, waveformId: string, revisionId: string, note = 'Please look.') {
  const answer = await client.post(`/api/v1/waveforms/${waveformId}/review`, { revisionId, note }).expect(201);
  return answer.body as OpenReview;
}

export function releasing(client: Client, waveformId: string, revisionId: string) {
  return client.post(`/api/v1/waveforms/${waveformId}/review/release`, { revisionId });
}

export async function release(client: Client, waveformId: string, revisionId: string): Promise<Edition> {
  return (await releasing(client, waveformId, revisionId).expect(201)).body as Edition;
}

export function withdrawing(client: Client, waveformId: string, number: number, reason = 'It splatters.') {
  return client.post(`/api/v1/waveforms/${waveformId}/editions/${number}/withdraw`, { reason });
}

/** A waveform whose first revision is edition 1. */
export async function createReleased(author: Client, reviewer: Client, document: WaveformDocument) {
  const waveform = await create(author, document);
  const revisionId = waveform.head!.revisionId;
  await ask(author, waveform.waveformId, revisionId);
  const edition = await release(reviewer, waveform.waveformId, revisionId);
  return { waveformId: waveform.waveformId, revisionId, edition };
}
