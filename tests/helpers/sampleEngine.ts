import { execFileSync } from 'node:child_process';
import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { createSampleEngine, type EngineExports, type SampleEngine } from '@/lib/synth';

const root = join(__dirname, '..', '..');
const file = join(root, 'public', 'wasm', 'engine.wasm');
const source = join(root, 'lib', 'synth', 'assembly');

/** The module as set-up builds it; built here where it is missing or older than its source. */
function engineModule(): WebAssembly.Module {
  const newest = Math.max(...readdirSync(source).map((name) => statSync(join(source, name)).mtimeMs));
  if (!existsSync(file) || statSync(file).mtimeMs < newest) {
    execFileSync(process.execPath, [join(root, 'scripts', 'build-engine.mjs')]);
  }
  return new WebAssembly.Module(new Uint8Array(readFileSync(file)));
}

/** An engine of its own; `onInstance` sees each instance that it makes. */
export function openTestEngine(onInstance: (exports: EngineExports) => void = () => undefined): SampleEngine {
  const module = engineModule();
  return createSampleEngine(() => {
    const exports = new WebAssembly.Instance(module).exports as unknown as EngineExports;
    onInstance(exports);
    return exports;
  });
}
