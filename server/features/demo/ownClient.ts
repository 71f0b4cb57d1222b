import http from 'node:http';
import type { z } from 'zod';
import { API_PREFIX, type Endpoint, type ResponseOf } from '@/lib/contracts/endpoint';

/** Where this very server listens. */
export interface OwnAddress {
  host: string;
  port: number;
  /** What a change must come from: PUBLIC_URL, or null for the request's own host. */
  publicOrigin: string | null;
}

interface OwnInput {
  params?: Record<string, string | number>;
  query?: Record<string, string | number>;
  body?: unknown;
  idempotencyKey?: string;
}

export interface OwnClient {
  ask<E extends Endpoint>(endpoint: E, input?: OwnInput): Promise<ResponseOf<E>>;
}

/**
 * Asks this server by its own API, over its own socket: what is made this way went through every check that a person's page
 * goes through. One client is one person; it keeps the cookie it was given.
 */
export function createOwnClient({ host, port, publicOrigin }: OwnAddress): OwnClient {
  let cookie = '';
  const ownHost = `localhost:${port}`;

  function send(method: string, path: string, headers: http.OutgoingHttpHeaders, body: string | null) {
    return new Promise<{ status: number; text: string }>((resolve, reject) => {
      const request = http.request({ host, port, method, path, headers }, (response) => {
        const given = response.headers['set-cookie']?.[0]?.split(';', 1)[0];
        if (given) cookie = given;
        const chunks: Buffer[] = [];
        response.on('data', (chunk: Buffer) => chunks.push(chunk));
        response.on('end', () => resolve({ status: response.statusCode ?? 0, text: Buffer.concat(chunks).toString() }));
        response.on('error', reject);
      });
      request.on('error', reject);
      request.end(body ?? undefined);
    });
  }

  return {
    async ask(endpoint, { params = {}, query = {}, body, idempotencyKey } = {}) {
      const place = endpoint.path.replace(/:(\w+)/g, (_all, name: string) => encodeURIComponent(params[name] ?? ''));
      const search = new URLSearchParams(
        Object.entries(query).map(([name, value]) => [name, String(value)]),
      ).toString();
      const headers = {
        Host: ownHost,
        Origin: publicOrigin ?? `http://${ownHost}`,
        ...(cookie && { Cookie: cookie }),
        ...(body !== undefined && { 'Content-Type': 'application/json' }),
        ...(idempotencyKey && { 'Idempotency-Key': idempotencyKey }),
      };
      const json = body === undefined ? null : JSON.stringify(body);
      const { status, text } = await send(
        endpoint.method,
        API_PREFIX + place + (search && `?${search}`),
        headers,
        json,
      );
      if (status >= 300) throw new Error(`${endpoint.name} answered ${status}: ${text}`);
      return (endpoint.response as z.ZodType).parse(JSON.parse(text)) as never;
    },
  };
}
