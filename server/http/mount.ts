import type { Request, Response, Router } from 'express';
import type { z } from 'zod';
import {
  API_PREFIX,
  type Access,
  type BodyOf,
  type Endpoint,
  type ParamsOf,
  type QueryOf,
  type ResponseInput,
} from '@/lib/contracts/endpoint';
import type { Actor } from '../auth/actor.ts';
import type { Deps } from '../deps.ts';
import { DomainError } from '../problem.ts';
import { createBodyWorker } from './bodyWorker.ts';
import { checkWith } from './checkJson.ts';
import { readBody } from './readBody.ts';
import { requestContext } from './requestContext.ts';

type AnyEndpoint = Endpoint<z.ZodType, z.ZodType, z.ZodType, z.ZodType>;

/** What a handler gets: everything checked. */
export interface Call<E extends { access: Access }> {
  /** The signed-in person; for `access: 'anyone'` take `visitor` instead. */
  actor: Actor;
  /** The signed-in person or null. */
  visitor: Actor | null;
  params: ParamsOf<E>;
  query: QueryOf<E>;
  body: BodyOf<E>;
  requestId: string;
  /** The Idempotency-Key header of an endpoint that takes one, else null. */
  idempotencyKey: string | null;
  /** For headers and cookies; the body is what the handler returns. */
  request: Request;
  response: Response;
}

export interface Mount {
  /** Answers JSON: of what the handler returns, the part that the contract names. */
  json<E extends AnyEndpoint>(
    endpoint: E,
    handle: (call: Call<E>) => ResponseInput<E> | Promise<ResponseInput<E>>,
  ): void;
  /** The handler writes the answer itself (downloads); rights and input are checked the same way. GET answers HEAD too. */
  file<E extends AnyEndpoint>(endpoint: E, handle: (call: Call<E>) => void | Promise<void>): void;
}

/** Reads the person behind a request; sessions and tokens end here. */
export type ReadActor = (request: Request, response: Response) => Promise<Actor | null>;

const IDEMPOTENCY_KEY = /^[\x21-\x7e]{8,128}$/;

export function createMount(router: Router, deps: Deps, readActor: ReadActor): Mount {
  const checkLarge = createBodyWorker(deps.config.buildDir);

  async function prepare<E extends AnyEndpoint>(endpoint: E, request: Request, response: Response): Promise<Call<E>> {
    if (deps.lifecycle.isStopping) throw new DomainError('stopping');
    // Who asks comes first: a stranger's body is not even read.
    const visitor = await readActor(request, response);
    requireAccess(endpoint, visitor);
    const params = checkStrings(endpoint.params, request.params, '/params');
    const query = checkStrings(endpoint.query, request.query, '/query');
    const idempotencyKey = endpoint.idempotent ? readKey(request) : null;
    const body = await readBody(request, endpoint, checkLarge);
    // The schemas above gave these values; a cast carries that over to the endpoint's own types.
    return {
      visitor,
      get actor() {
        if (!visitor) throw new DomainError('sign_in_needed');
        return visitor;
      },
      params: params as ParamsOf<E>,
      query: query as QueryOf<E>,
      body: body as BodyOf<E>,
      requestId: requestContext(request).requestId,
      idempotencyKey,
      request,
      response,
    };
  }

  function route(endpoint: AnyEndpoint, run: (request: Request, response: Response) => Promise<void>): void {
    const method = endpoint.method.toLowerCase() as Lowercase<typeof endpoint.method>;
    router[method](API_PREFIX + endpoint.path, run);
  }

  return {
    json(endpoint, handle) {
      route(endpoint, async (request, response) => {
        const call = await prepare(endpoint, request, response);
        const value = await handle(call);
        response.setHeader('Cache-Control', 'no-store');
        // An allow-list: what the contract does not name is not sent, whatever a row held.
        response.status(endpoint.status ?? 200).json(endpoint.response.parse(value));
      });
    },
    file(endpoint, handle) {
      route(endpoint, async (request, response) => handle(await prepare(endpoint, request, response)));
    },
  };
}

/** What may not be seen is not there: a refused look answers not_found, a refused act action_forbidden. */
function requireAccess(endpoint: AnyEndpoint, visitor: Actor | null): void {
  const { access, method } = endpoint;
  if (access === 'anyone') return;
  if (!visitor) throw new DomainError('sign_in_needed');
  if (access === 'signedIn' || visitor.rights.has(access)) return;
  throw new DomainError(method === 'GET' ? 'not_found' : 'action_forbidden');
}

function checkStrings(schema: z.ZodType | undefined, value: unknown, base: string): unknown {
  if (!schema) return undefined;
  const checked = checkWith(schema, value, base);
  if (checked.ok) return checked.value;
  // An id that cannot be one names nothing.
  if (base === '/params') throw new DomainError('not_found');
  throw new DomainError('invalid', { issues: checked.issues, moreIssues: checked.more });
}

function readKey(request: Request): string | null {
  const key = request.get('Idempotency-Key');
  if (key === undefined) return null;
  if (!IDEMPOTENCY_KEY.test(key))
    throw new DomainError('malformed', 'The Idempotency-Key must be 8 to 128 visible characters.');
  return key;
}
