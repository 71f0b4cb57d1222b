import path from 'node:path';
import { readConfig, StartRefused } from './config.ts';
import { startServer } from './start.ts';

const STOP_MS = 4900;

// build/ lies one level below the root; no other file of the server asks where it is.
const rootDir = path.resolve(import.meta.dirname, '..');

let stop: ((exitCode: number) => void) | null = null;
let isAsked = false;

// before anything is said: who reads the address may stop the server at once
function onSignal(): void {
  isAsked = true;
  stop?.(0);
}
process.on('SIGTERM', onSignal);
process.on('SIGINT', onSignal);

function onStopRequest(reason: string): void {
  console.error(reason);
  stop?.(1);
}

try {
  const { lifecycle } = await startServer(
    readConfig(process.env, rootDir),
    (sentence) => console.log(sentence),
    onStopRequest,
  );
  stop = (exitCode) => {
    stop = null;
    setTimeout(() => process.exit(exitCode || 1), STOP_MS).unref();
    void lifecycle.stop().then(() => process.exit(exitCode));
  };
  if (isAsked) stop(0);
} catch (error) {
  if (!(error instanceof StartRefused)) throw error;
  console.error(error.message);
  process.exitCode = 1;
}
