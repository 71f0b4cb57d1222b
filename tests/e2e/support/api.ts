import { expect, type APIRequestContext, type APIResponse } from '@playwright/test';
import { demoSignIn, listDemoPeople } from '@/lib/contracts/auth';
import type { Endpoint, ResponseOf } from '@/lib/contracts/endpoint';
import { addressOf, type CallInput } from '@/lib/client/apiClient';

export type DemoName = 'Ines Okoro' | 'Mira Sand' | 'Tomas Vell' | 'Jun Aldane' | 'Nora Quist';

// The four schemas differ by endpoint; each use names its own through E.
type AnyEndpoint = Endpoint<any, any, any, any>;

/** Asks as the person of this request context; the Origin is what a page of ours would send. */
export function send<E extends AnyEndpoint>(
  request: APIRequestContext,
  origin: string,
  endpoint: E,
  input: Omit<CallInput<E>, 'signal'>,
): Promise<APIResponse> {
  const { body } = input as { body?: unknown };
  return request.fetch(origin + addressOf(endpoint, input as object), {
    method: endpoint.method,
    headers: { Origin: origin },
    ...(body === undefined ? {} : { data: body }),
  });
}

/** As `send`, and refuses what was refused. */
export async function ask<E extends AnyEndpoint>(
  request: APIRequestContext,
  origin: string,
  endpoint: E,
  input: Omit<CallInput<E>, 'signal'>,
): Promise<ResponseOf<E>> {
  const answer = await send(request, origin, endpoint, input);
  expect(answer.ok(), `${endpoint.name}: ${answer.status()} ${await answer.text()}`).toBe(true);
  return endpoint.response.parse(await answer.json()) as ResponseOf<E>;
}

/** Inserts a session by the demo's own sign-in, without opening a page. */
export async function signIn(request: APIRequestContext, origin: string, name: DemoName): Promise<void> {
  const { people } = await ask(request, origin, listDemoPeople, {});
  const person = people.find((one) => one.name === name);
  expect(person, `${name} is in the demo team`).toBeDefined();
  await ask(request, origin, demoSignIn, { body: { personId: person!.personId } });
}
