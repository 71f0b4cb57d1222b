import { existsSync, readFileSync } from 'node:fs';
import { createSampleEngine, type EngineExports, type SampleEngine } from '@/lib/synth';

let engine: SampleEngine | undefined;

/**
 * Takes the sample engine of this process (each thread has its own) from the built module. Where the file is missing,
 * samples are computed without it: the same bits, slower.
 */
export function loadSampleEngine(file: string): void {
  if (!existsSync(file)) return;
  const module = new WebAssembly.Module(new Uint8Array(readFileSync(file)));
  engine = createSampleEngine(() => new WebAssembly.Instance(module).exports as unknown as EngineExports);
}

/** The engine that loadSampleEngine took, undefined without one. */
export const sampleEngine = (): SampleEngine | undefined => engine;
