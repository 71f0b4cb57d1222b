import {
  API_PREFIX,
  type BodyInput,
  type Endpoint,
  type ParamsInput,
  type QueryInput,
  type ResponseOf,
} from '@/lib/contracts/endpoint';
import { problemSchema, type Problem } from '@/lib/contracts/problem';

// The four schemas differ by endpoint; each use names its own through E.
type AnyEndpoint = Endpoint<any, any, any, any>;

/** A part that the endpoint has must be given; one that it has not, or that may be empty, may be left out. */
type Part<Name extends string, T> = undefined extends T ? { [K in Name]?: T } : { [K in Name]: T };

export type CallInput<E> = Part<'params', ParamsInput<E>> &
  Part<'query', QueryInput<E>> &
  Part<'body', BodyInput<E>> & {
    signal?: AbortSignal;
    /** The same key for each retry of one and the same act. */
    idempotencyKey?: string;
    /** The act goes on when the page is left; browsers take bodies up to 64 KiB with it. */
    keepalive?: boolean;
  };

/** Nothing expected is thrown. `problem` is null where no answer came: no connection, or the server is not there. */
export type CallAnswer<T> = { ok: true; value: T } | { ok: false; problem: Problem | null };

/** A document is a few times smaller in gzip; below this the work is not worth it. */
const COMPRESS_FROM_CHARACTERS = 64 * 1024;

interface LooseInput {
  params?: Record<string, string | number>;
  query?: Record<string, unknown>;
  body?: unknown;
  signal?: AbortSignal;
  idempotencyKey?: string;
  keepalive?: boolean;
}

/** The address of an endpoint, e.g. for a link to a download. */
export function addressOf<E extends AnyEndpoint>(endpoint: E, input: Pick<LooseInput, 'params' | 'query'>): string {
  const path = endpoint.path.replace(/:(\w+)/g, (_all, name: string) => {
    const value = input.params?.[name];
    if (value === undefined) throw new Error(`${endpoint.name} needs the parameter ${name}`);
    return encodeURIComponent(value);
  });
  const query = new URLSearchParams();
  for (const [name, value] of Object.entries(input.query ?? {})) {
    if (value !== undefined && value !== null) query.set(name, String(value));
  }
  const search = query.toString();
  return API_PREFIX + path + (search && `?${search}`);
}

/** Asks an endpoint of our own origin and checks the answer by its contract. Throws only when `signal` aborts. */
export async function call<E extends AnyEndpoint>(
  endpoint: E,
  input: CallInput<E>,
): Promise<CallAnswer<ResponseOf<E>>> {
  const { params, query, body, signal, idempotencyKey, keepalive } = input as LooseInput;
  const headers: Record<string, string> = { Accept: 'application/json' };
  if (idempotencyKey !== undefined) headers['Idempotency-Key'] = idempotencyKey;
  try {
    const sent = body === undefined ? undefined : await pack(JSON.stringify(body), headers);
    const response = await fetch(addressOf(endpoint, { params, query }), {
      method: endpoint.method,
      credentials: 'same-origin',
      headers,
      body: sent,
      signal,
      keepalive,
    });
    const answer: unknown = await response.json();
    if (response.ok) return { ok: true, value: endpoint.response.parse(answer) as ResponseOf<E> };
    return { ok: false, problem: readProblem(answer, response) };
  } catch (error) {
    if (signal?.aborted) throw error;
    // A dead connection, a proxy's own page, or an answer that breaks the contract: none of them may pass for an answer.
    if (isContractBreak(error)) console.error(`${endpoint.name} answered what its contract does not say`, error);
    return { ok: false, problem: null };
  }
}

async function pack(json: string, headers: Record<string, string>): Promise<BodyInit> {
  headers['Content-Type'] = 'application/json';
  if (json.length < COMPRESS_FROM_CHARACTERS || typeof CompressionStream === 'undefined') return json;
  headers['Content-Encoding'] = 'gzip';
  return new Response(new Blob([json]).stream().pipeThrough(new CompressionStream('gzip'))).blob();
}

function readProblem(answer: unknown, response: Response): Problem | null {
  const parsed = problemSchema.safeParse(answer);
  if (parsed.success) return parsed.data;
  const code = response.status === 503 ? 'stopping' : 'internal';
  return {
    type: `urn:combwright:problem:${code}`,
    title: 'The server failed.',
    status: response.status,
    detail: `The server answered ${response.status}.`,
    instance: response.headers.get('X-Request-Id') ?? '',
    code,
  };
}

function isContractBreak(error: unknown): boolean {
  return error instanceof Error && error.name === 'ZodError';
}
