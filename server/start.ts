import { existsSync, mkdirSync } from 'node:fs';
import { createServer, type Server } from 'node:http';
import path from 'node:path';
import pino, { type Logger } from 'pino';
import { monotonicFactory } from 'ulid';
import { lockDataDir } from '@/db/lockDataDir';
import { migrateDatabase } from '@/db/migrate';
import { openDatabase } from '@/db/openDatabase';
import { createApp } from './app.ts';
import { isLoopback, StartRefused, type Config } from './config.ts';
import type { Deps } from './deps.ts';
import { kindOfInstallation, markInstallation, prepareFirstRun } from './features/auth/installation.ts';
import type { OwnAddress } from './features/demo/ownClient.ts';
import { seedDemo } from './features/demo/seed.ts';
import { openingRefusal } from './openingRefusal.ts';
import { createLifecycle, type StoppableLifecycle } from './lifecycle.ts';

/** Connections still busy after this are cut, so that the whole stop stays within 5 s. */
const FINISH_MS = 3500;

export interface RunningServer {
  address: string;
  lifecycle: StoppableLifecycle;
}

/** What the person at the terminal reads; never the log. */
type Say = (sentence: string) => void;

/** Lock, migrate, seed, listen. Every refusal is a StartRefused with a sentence; nothing stays open then. */
export async function startServer(
  config: Config,
  say: Say,
  onStopRequest: (reason: string) => void,
): Promise<RunningServer> {
  // To standard error: what is said on standard output (the first-run code) is never part of the log.
  const log = pino(
    { level: config.logLevel, redact: ['*.password', '*.token', '*.code'] },
    pino.destination({ dest: 2, sync: true }),
  );
  const lifecycle = createLifecycle(onStopRequest);
  try {
    const deps = openDataOrRefuse(config, log, lifecycle);
    const kind = kindOfInstallation(deps);
    if (kind === 'demo') requireDemoPlace(config);
    markInstallation(deps, kind);
    const app = createApp(deps);
    const server = createServer(app);
    const port = await listen(server, config);
    lifecycle.onStop(() => finishRequests(server));
    if (kind === 'demo') await seedOrSay(deps, { ...config, port }, say);
    const host = config.host.includes(':') ? `[${config.host}]` : config.host;
    const address =
      config.publicOrigin ?? `http://${host === '0.0.0.0' || host === '[::]' ? 'localhost' : host}:${port}`;
    say(`Combwright is at ${address}`);
    if (!existsSync(path.join(config.webDir, 'index.html')))
      say(`The page is not in ${config.webDir}: the API answers alone. npm start makes the page.`);
    const code = kind === 'team' ? prepareFirstRun(deps) : null;
    if (code)
      say(`Nobody is here yet. Open ${address}/first-run and make the first administrator with this code: ${code}`);
    return { address, lifecycle };
  } catch (error) {
    await lifecycle.stop();
    throw error;
  }
}

function openDataOrRefuse(config: Config, log: Logger, lifecycle: StoppableLifecycle): Deps {
  try {
    return openData(config, log, lifecycle);
  } catch (error) {
    throw openingRefusal(error, config);
  }
}

function openData(config: Config, log: Logger, lifecycle: StoppableLifecycle): Deps {
  mkdirSync(config.dataDir, { recursive: true });
  const lock = lockDataDir(config.dataDir);
  if (!lock) {
    throw new StartRefused(
      `Another server uses ${config.dataDir} already. Stop it first, or set DATA_DIR to another directory.`,
    );
  }
  lifecycle.onStop(() => lock.release());
  const file = path.join(config.dataDir, 'combwright.db');
  const store = openDatabase(file, () =>
    lifecycle.requestStop(
      `The database file ${file} vanished or was replaced. The server stops, so that nothing is written beside it.`,
    ),
  );
  lifecycle.onStop(() => store.close());
  migrateDatabase(store, config.migrationsDir);
  const ulid = monotonicFactory();
  const clock = { nowMs: () => Date.now() };
  return { config, clock, store, log, lifecycle, newId: () => ulid(clock.nowMs()) };
}

/** A demo that is not whole is still a demo; the next start goes on. */
async function seedOrSay(deps: Deps, address: OwnAddress, say: Say): Promise<void> {
  try {
    await seedDemo(deps, address);
  } catch (error) {
    deps.log.error({ err: error }, 'the demo team is not complete');
    say('The demo team is not complete; the log says why. The next start goes on with it.');
  }
}

/** Anyone may sign in to a demo as anyone: it must not be reachable from outside. */
function requireDemoPlace(config: Config): void {
  const { dataDir, host } = config;
  const remedy = 'Set DATA_DIR to an empty directory and DEMO=no for a real installation.';
  if (config.isProduction)
    throw new StartRefused(`${dataDir} is for a demo team, which is not for production. ${remedy}`);
  if (!isLoopback(host)) {
    throw new StartRefused(`${dataDir} is for a demo team, which listens on 127.0.0.1 only, not on ${host}. ${remedy}`);
  }
}

function listen(server: Server, config: Config): Promise<number> {
  return new Promise((resolve, reject) => {
    server.once('error', (error: NodeJS.ErrnoException) => {
      const words: Record<string, string> = {
        EADDRINUSE: `Port ${config.port} is taken already. Set PORT to another one.`,
        EACCES: `Port ${config.port} needs more rights. Set PORT to one above 1023.`,
        EADDRNOTAVAIL: `This machine does not have the address ${config.host}. Set HOST to one that it has.`,
      };
      const sentence = words[error.code ?? ''];
      reject(sentence ? new StartRefused(sentence) : error);
    });
    server.listen(config.port, config.host, () => {
      const address = server.address();
      resolve(typeof address === 'object' && address ? address.port : config.port);
    });
  });
}

/** Takes no new connection, lets the requests in hand end, cuts what is left. */
function finishRequests(server: Server): Promise<void> {
  return new Promise((resolve) => {
    const timer = setTimeout(() => server.closeAllConnections(), FINISH_MS);
    server.close(() => {
      clearTimeout(timer);
      resolve();
    });
    server.closeIdleConnections();
  });
}
