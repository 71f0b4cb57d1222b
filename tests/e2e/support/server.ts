import { spawn, type ChildProcess } from 'node:child_process';
import path from 'node:path';

const rootDir = path.resolve(import.meta.dirname, '../../..');

/** The bundled server as a process of its own, for tests that end it or need an installation without people. */
export interface OwnServer {
  origin: string;
  /** What stood on standard output so far, and what was logged. */
  out(): string;
  log(): string;
  /** As a power cut: nothing is finished. */
  kill(): Promise<void>;
  /** Again on the same port and data. */
  restart(): Promise<void>;
}

const running = new Set<ChildProcess>();

export async function startOwnServer(dataDir: string, env: Record<string, string> = {}): Promise<OwnServer> {
  let [out, log, port] = ['', '', '0'];
  let child: ChildProcess;
  const start = () =>
    new Promise<string>((resolve, reject) => {
      out = '';
      const started = spawn(process.execPath, [path.join(rootDir, 'build/server.mjs')], {
        cwd: rootDir,
        env: {
          PATH: process.env.PATH ?? '',
          PORT: port,
          DATA_DIR: dataDir,
          WEB_DIR: process.env.WEB_DIR ?? 'dist',
          LOG_LEVEL: 'warn',
          ...env,
        },
        stdio: ['ignore', 'pipe', 'pipe'],
      });
      child = started;
      running.add(started);
      started.stdout.on('data', (chunk: Buffer) => {
        out += chunk.toString();
        const address = /is at (http:\/\/\S+)/.exec(out)?.[1];
        if (address) resolve(address);
      });
      started.stderr.on('data', (chunk: Buffer) => void (log += chunk.toString()));
      started.once('close', () => {
        running.delete(started);
        reject(new Error(`The server ended. ${log}`));
      });
    });
  const origin = await start();
  port = new URL(origin).port;
  return {
    origin,
    out: () => out,
    log: () => log,
    kill: () =>
      new Promise((resolve) => {
        child.once('close', () => resolve());
        child.kill('SIGKILL');
      }),
    restart: async () => void (await start()),
  };
}

/** For afterAll: whatever is left running. */
export function killOwnServers(): void {
  for (const child of running) child.kill('SIGKILL');
}
