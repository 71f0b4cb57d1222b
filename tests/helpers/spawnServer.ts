import { spawn, type ChildProcess } from 'node:child_process';
import path from 'node:path';

const rootDir = path.resolve(__dirname, '../..');

export interface SpawnedServer {
  process: ChildProcess;
  /** What stood on standard output and on standard error so far. */
  out(): string;
  err(): string;
  /** The address it said; rejects with its last words where it ended before. */
  ready: Promise<string>;
  exitCode: Promise<number | null>;
}

const running = new Set<ChildProcess>();

/** The bundled server as a process of its own, on a free port; `before` is what a shell does first, such as a limit. */
export function spawnServer(env: Record<string, string>, before = ''): SpawnedServer {
  const command = [process.execPath, path.join(rootDir, 'build/server.mjs')];
  const [program, ...args] = before === '' ? command : ['bash', '-c', `${before}; exec "$@"`, 'bash', ...command];
  const process_ = spawn(program!, args, {
    cwd: rootDir,
    env: { PATH: process.env.PATH ?? '', PORT: '0', ...env },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  running.add(process_);
  let [out, err] = ['', ''];
  const exitCode = new Promise<number | null>((resolve) => {
    process_.once('close', (code) => {
      running.delete(process_);
      resolve(code);
    });
  });
  const ready = new Promise<string>((resolve, reject) => {
    process_.stdout.on('data', (chunk: Buffer) => {
      out += chunk.toString();
      const address = /is at (http\S+)/.exec(out)?.[1];
      if (address) resolve(address);
    });
    process_.stderr.on('data', (chunk: Buffer) => void (err += chunk.toString()));
    void exitCode.then(() => reject(new Error(err)));
  });
  ready.catch(() => undefined); // not every test waits for it
  return { process: process_, out: () => out, err: () => err, ready, exitCode };
}

/** For afterEach: whatever a failed test left running. */
export function killSpawned(): void {
  for (const process_ of running) process_.kill('SIGKILL');
}
