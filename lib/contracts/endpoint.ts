import type { z } from '@/lib/document/zod';
import type { Right } from './common';
import type { Issue } from './problem';

/** Who may ask at all. Rights that hang on one object (own revision, state, four eyes) are the service's on top. */
export type Access = 'anyone' | 'signedIn' | Right;

export type Method = 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';

/** What a check of untrusted input gives; the list of issues is cut, `more` counts the rest. */
export type Checked<T> = { ok: true; value: T } | { ok: false; issues: Issue[]; more: number };

/**
 * One endpoint is one value: the server mounts it, the client calls it, OpenAPI and the access matrix are made from it.
 * `path` starts below /api/v1 and names its parameters as `:name`. Params and query come as strings: coerce there and nowhere else.
 */
export interface Endpoint<
  Params extends z.ZodType = z.ZodType,
  Query extends z.ZodType = z.ZodType,
  Body extends z.ZodType = z.ZodType,
  Response extends z.ZodType = z.ZodType,
> {
  /** Unique over the API; OpenAPI's operationId. */
  name: string;
  method: Method;
  path: `/${string}`;
  access: Access;
  summary: string;
  params?: Params;
  query?: Query;
  body?: Body;
  /** Most bytes of the body, inflated. Default: DEFAULT_BODY_BYTES. */
  bodyBytesMost?: number;
  /** A check faster and better worded than `body` (which still describes it in OpenAPI); used by the server in its place. */
  checkBody?: (body: unknown) => Checked<z.output<Body>>;
  /** Takes an Idempotency-Key: a retry with the same key answers what the first one did. */
  idempotent?: boolean;
  response: Response;
  /** A file in place of JSON: `response` is then z.never()-like and the handler writes the answer itself. */
  file?: { mediaType: string; takesRanges?: boolean };
  /** Default 200. */
  status?: number;
}

export const API_PREFIX = '/api/v1';
export const DEFAULT_BODY_BYTES = 256 * 1024;
export const DOCUMENT_BODY_BYTES = 32 * 1024 * 1024;

/** Keeps the exact schema types of an endpoint, so that server and client infer theirs from it. */
export function defineEndpoint<
  Response extends z.ZodType,
  Params extends z.ZodType = z.ZodUndefined,
  Query extends z.ZodType = z.ZodUndefined,
  Body extends z.ZodType = z.ZodUndefined,
>(endpoint: Endpoint<Params, Query, Body, Response>): Endpoint<Params, Query, Body, Response> {
  return endpoint;
}

export type ParamsOf<E> = E extends Endpoint<infer P, z.ZodType, z.ZodType, z.ZodType> ? z.output<P> : never;
export type QueryOf<E> = E extends Endpoint<z.ZodType, infer Q, z.ZodType, z.ZodType> ? z.output<Q> : never;
export type BodyOf<E> = E extends Endpoint<z.ZodType, z.ZodType, infer B, z.ZodType> ? z.output<B> : never;
export type ResponseOf<E> = E extends Endpoint<z.ZodType, z.ZodType, z.ZodType, infer R> ? z.output<R> : never;
/** What a caller hands over and a handler hands back: before defaults and coercion. */
export type ParamsInput<E> = E extends Endpoint<infer P, z.ZodType, z.ZodType, z.ZodType> ? z.input<P> : never;
export type QueryInput<E> = E extends Endpoint<z.ZodType, infer Q, z.ZodType, z.ZodType> ? z.input<Q> : never;
export type BodyInput<E> = E extends Endpoint<z.ZodType, z.ZodType, infer B, z.ZodType> ? z.input<B> : never;
export type ResponseInput<E> = E extends Endpoint<z.ZodType, z.ZodType, z.ZodType, infer R> ? z.input<R> : never;
