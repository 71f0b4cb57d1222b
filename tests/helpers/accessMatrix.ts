import { addressOf } from '@/lib/client/apiClient';
import { endpoints } from '@/lib/contracts/endpoints';
import { startTestServer, type PersonKey, type TestServer } from './testServer';

/** The columns of every table, in this order. */
export const WHO = ['anonymous', 'author', 'otherAuthor', 'reviewer', 'operator', 'admin'] as const;
export type Who = (typeof WHO)[number];

/** What one cell asks. Only the parts that the endpoint has. */
export interface AccessRequest {
  params?: Record<string, string | number>;
  query?: Record<string, unknown>;
  body?: object;
  headers?: Record<string, string>;
}

export interface AccessTable {
  /** What a server is brought to before it is asked; '-' needs none. */
  states: Record<string, (server: TestServer) => unknown>;
  /** By endpoint name: the request in that state. `object` is what the state returned. */
  requests: Record<string, (object: any, server: TestServer, who: Who) => AccessRequest>;
  /** `endpoint | state | anonymous | author | otherAuthor | reviewer | operator | admin`, cells `200` or `403 own_work`. */
  table: string;
}

interface Row {
  name: string;
  state: string;
  expected: [Who, string][];
}

/** The rows that a person reads, as the rows that a test runs. A first line of column names must be right. */
export function readAccessTable({ table }: AccessTable): Row[] {
  const lines = table.split('\n').map((line) => line.split('|').map((cell) => cell.trim()));
  const [head, ...rows] = lines.filter((cells) => cells.length > 1);
  expectColumns(head ?? [], ['endpoint', 'state', ...WHO]);
  return rows.map((cells) => {
    const [name = '', state = '', ...rest] = cells;
    if (rest.length !== WHO.length)
      throw new Error(`${name}, ${state}: ${rest.length} cells in place of ${WHO.length}`);
    return { name, state, expected: WHO.map((who, i) => [who, rest[i] ?? '']) };
  });
}

function expectColumns(found: string[], wanted: string[]): void {
  if (found.join() !== wanted.join()) throw new Error(`The columns must be ${wanted.join(' | ')}`);
}

/** True where the cell only looks or is refused: nothing of it can show in the next one, and if it does the cell itself is wrong. */
const changesNothing = (name: string, wanted: string) =>
  endpointOf(name)?.method === 'GET' || Number(wanted.slice(0, 3)) >= 400;

const endpointOf = (name: string) => endpoints.find((candidate) => candidate.name === name);

interface Scene {
  server: TestServer;
  object: unknown;
}

async function setUp(access: AccessTable, state: string): Promise<Scene> {
  const makeState = state === '-' ? () => undefined : access.states[state];
  if (!makeState) throw new Error(`the state ${state} is not described`);
  const server = await startTestServer();
  return { server, object: await makeState(server) };
}

/** One test per row. Cells that change nothing share a server for each state; every other one has a server of its own. */
export function describeAccess(title: string, access: AccessTable): void {
  describe(`access: ${title}`, () => {
    const shared = new Map<string, Promise<Scene>>();
    afterAll(async () => {
      for (const scene of shared.values()) await (await scene).server.close();
    });
    const lookedAt = (state: string) => {
      const scene = shared.get(state) ?? setUp(access, state);
      shared.set(state, scene);
      return scene;
    };

    for (const { name, state, expected } of readAccessTable(access)) {
      it(`${name}${state === '-' ? '' : `, ${state}`}`, async () => {
        const found: [Who, string][] = [];
        for (const [who, wanted] of expected) {
          if (changesNothing(name, wanted)) {
            found.push([who, await tryCell(access, name, who, wanted, await lookedAt(state))]);
            continue;
          }
          const scene = await setUp(access, state);
          try {
            found.push([who, await tryCell(access, name, who, wanted, scene)]);
          } finally {
            await scene.server.close();
          }
        }
        expect(Object.fromEntries(found)).toEqual(Object.fromEntries(expected));
      });
    }
  });
}

async function tryCell(
  access: AccessTable,
  name: string,
  who: Who,
  wanted: string,
  { server, object }: Scene,
): Promise<string> {
  const endpoint = endpointOf(name);
  const makeRequest = access.requests[name];
  if (!endpoint || !makeRequest) throw new Error(`${name} is not described`);
  const { params, query, body, headers } = makeRequest(object, server, who);
  const client = await server.as(who satisfies PersonKey | 'anonymous');
  const method = endpoint.method.toLowerCase() as Lowercase<typeof endpoint.method>;
  const answer = await client[method](addressOf(endpoint, { params, query }), body).set(headers ?? {});
  // The code is compared only where the table names one.
  const code = (answer.body as { code?: string }).code;
  return wanted.includes(' ') && code ? `${answer.status} ${code}` : String(answer.status);
}
