import { createSampleEngine, type EngineExports, type SampleEngine } from '@/lib/synth/index';

/** The engine's module from our own origin. Without it a worker's samples have the same bits, slower. */
export async function loadEngine(): Promise<SampleEngine | undefined> {
  try {
    const module = await WebAssembly.compileStreaming(fetch('/wasm/engine.wasm'));
    return createSampleEngine(() => new WebAssembly.Instance(module).exports as unknown as EngineExports);
  } catch {
    return undefined;
  }
}
