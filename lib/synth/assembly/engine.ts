// The sample engine: everything here works on addresses in its own memory, which its owner lays out (lib/synth/engine).
export { transform } from './transform';
export { floatWords, integerWords, measure, regroup } from './samples';
export { mapRuns } from './points';

/** Equal to kernelVersion of lib/synth/engine: raised there and here with every change of what is called, or of what it means. */
export function builtVersion(): i32 {
  return 1;
}

/** The first byte that is free, a multiple of 4096. */
export function freeFrom(): usize {
  return (__heap_base + 4095) & ~4095;
}
