import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import type { Express } from 'express';
import pino from 'pino';
import request from 'supertest';
import { monotonicFactory } from 'ulid';
import { migrateDatabase } from '@/db/migrate';
import { openDatabase, type Store } from '@/db/openDatabase';
import type { Role } from '@/lib/contracts/common';
import { createApp } from '@/server/app';
import { hashPassword } from '@/server/auth/passwords';
import { rightsOf } from '@/server/auth/permissions';
import { createSessions } from '@/server/auth/sessions';
import type { Actor } from '@/server/auth/actor';
import { readConfig, type Config } from '@/server/config';
import type { Deps } from '@/server/deps';
import { insertInstallation } from '@/server/features/auth/installationRepo';
import { insertUser } from '@/server/features/auth/repo';
import type { Measuring } from '@/server/figures/measureThread';
import { createLifecycle, type StoppableLifecycle } from '@/server/lifecycle';

const rootDir = path.resolve(__dirname, '../..');

/** What supertest asks of: the address is fixed, so that the Origin of a change can be right. */
export const ORIGIN = 'http://combwright.test';

/** The people of every api test: one of each role, a second author, one with no role at all. */
export const people = {
  author: { name: 'Ada Author', roles: ['author'] },
  otherAuthor: { name: 'Otto Author', roles: ['author'] },
  reviewer: { name: 'Rhea Reviewer', roles: ['reviewer'] },
  operator: { name: 'Olga Operator', roles: ['operator'] },
  admin: { name: 'Alan Admin', roles: ['admin'] },
  nobody: { name: 'Nils Norole', roles: [] },
} as const satisfies Record<string, { name: string; roles: readonly Role[] }>;
export type PersonKey = keyof typeof people;

/** Of everybody here. */
export const TEST_PASSWORD = 'a long enough password';
let migrated: Buffer | undefined;
let passwordHashOnce: Promise<string> | undefined;

export interface FakeClock {
  nowMs(): number;
  advance(ms: number): void;
}

/** A signed-in (or anonymous) person who asks: supertest with cookie and Origin set. */
export interface Client {
  get(path: string): request.Test;
  post(path: string, body?: object): request.Test;
  put(path: string, body?: object): request.Test;
  patch(path: string, body?: object): request.Test;
  delete(path: string): request.Test;
}

export interface TestServer {
  app: Express;
  deps: Deps;
  store: Store;
  clock: FakeClock;
  lifecycle: StoppableLifecycle;
  dataDir: string;
  /** Log lines as objects, for tests that look for secrets or ids. */
  logLines: Record<string, unknown>[];
  personId(key: PersonKey): string;
  /** For services called directly. */
  actor(key: PersonKey): Actor;
  /** Signed in by a session in the table, without the cost of a password. */
  as(key: PersonKey | 'anonymous'): Promise<Client>;
  clientOf(cookie: string | null): Client;
  close(): Promise<void>;
}

/** Leaves every figure as still being measured: most tests look at none and need no thread. */
const noMeasuring: Measuring = { measure: () => Promise.resolve(), stop: () => Promise.resolve() };

export interface TestServerOptions {
  measuring?: Measuring;
  config?: Partial<Config>;
  kind?: 'team' | 'demo';
  /** False: an empty installation. */
  withPeople?: boolean;
}

export async function startTestServer(options: TestServerOptions = {}): Promise<TestServer> {
  const dataDir = mkdtempSync(path.join(os.tmpdir(), 'combwright-test-'));
  const config: Config = { ...readConfig({ DATA_DIR: dataDir, PUBLIC_URL: ORIGIN }, rootDir), ...options.config };
  const file = path.join(dataDir, 'combwright.db');
  // Migrated once per test file, by the real migrations; a copy of the bytes is the same database, sooner.
  if (migrated) writeFileSync(file, migrated);
  const store = openDatabase(file);
  if (!migrated) {
    migrateDatabase(store, config.migrationsDir);
    migrated = store.sqlite.serialize();
  }

  let nowMs = Date.UTC(2031, 4, 6, 9, 0, 0);
  const clock: FakeClock = {
    nowMs: () => nowMs,
    advance: (ms) => void (nowMs += ms),
  };
  const logLines: Record<string, unknown>[] = [];
  const log = pino({ level: 'debug' }, { write: (line: string) => void logLines.push(JSON.parse(line) as never) });
  const lifecycle = createLifecycle(() => undefined);
  const ulid = monotonicFactory();
  const deps: Deps = { config, clock, store, log, lifecycle, newId: () => ulid(clock.nowMs()) };

  passwordHashOnce ??= hashPassword(TEST_PASSWORD);
  const passwordHash = await passwordHashOnce;
  const ids = new Map<PersonKey, string>();
  store.write((tx) => {
    insertInstallation(tx, options.kind ?? 'team', clock.nowMs());
    if (options.withPeople === false) return;
    for (const [key, person] of Object.entries(people) as [PersonKey, { name: string; roles: readonly Role[] }][]) {
      const id = deps.newId();
      ids.set(key, id);
      const email = `${key.toLowerCase()}@example.org`;
      insertUser(tx, { id, email, name: person.name, passwordHash, createdAtMs: clock.nowMs() }, person.roles);
    }
  });
  const app = createApp(deps, options.measuring ?? noMeasuring);

  const server: TestServer = {
    app,
    deps,
    store,
    clock,
    lifecycle,
    dataDir,
    logLines,
    personId(key) {
      const id = ids.get(key);
      if (!id) throw new Error(`no person ${key}`);
      return id;
    },
    actor(key) {
      const { name, roles } = people[key];
      return { personId: server.personId(key), name, roles, rights: rightsOf(roles), sessionId: null };
    },
    async as(key) {
      if (key === 'anonymous') return server.clientOf(null);
      let cookie = '';
      const quietRequest = { headers: {}, get: () => 'test' };
      const response = { append: (_name: string, value: string) => void (cookie = value.split(';', 1)[0] ?? '') };
      await createSessions(deps).begin(server.personId(key), quietRequest as never, response as never);
      return server.clientOf(cookie);
    },
    clientOf(cookie) {
      const prepare = (test: request.Test) => {
        void test.set('Origin', ORIGIN).set('Host', 'combwright.test');
        if (cookie) void test.set('Cookie', cookie);
        return test;
      };
      return {
        get: (url) => prepare(request(app).get(url)),
        post: (url, body) => prepare(request(app).post(url)).send(body ?? undefined),
        put: (url, body) => prepare(request(app).put(url)).send(body ?? undefined),
        patch: (url, body) => prepare(request(app).patch(url)).send(body ?? undefined),
        delete: (url) => prepare(request(app).delete(url)),
      };
    },
    async close() {
      await lifecycle.stop();
      store.close();
      rmSync(dataDir, { recursive: true, force: true });
    },
  };
  return server;
}
