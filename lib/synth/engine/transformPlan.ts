import { passesOf } from '../fft/mixedRadix';
import { createRootsOfUnity } from '../math/turns';

const HEADER_BYTES = 64;

/** True for the sizes that the engine transforms: multiples of 8 with at least two passes. */
export function isEngineSize(size: number): boolean {
  return size % 8 === 0 && size >= 16;
}

/** A transform's plan as the kernel reads it, to be laid anywhere: addresses in it are filled in by `place`. */
export interface TransformPlan {
  readonly bytes: number;
  /** Writes the plan to `memory` at `at` (a multiple of 16), with two scratch areas of 16 bytes a bin. */
  place(memory: ArrayBuffer, at: number, scratch: number, other: number): void;
}

const KNOWN_MOST = 4;
const known = new Map<number, TransformPlan>();

/**
 * The plan of a size for which isEngineSize holds; the last few are kept. Its turns are this library's own, bit for bit those
 * of mixedRadix.
 */
export function createTransformPlan(size: number): TransformPlan {
  const plan = known.get(size) ?? computePlan(size);
  known.delete(size);
  known.set(size, plan);
  if (known.size > KNOWN_MOST) known.delete(known.keys().next().value!);
  return plan;
}

function computePlan(size: number): TransformPlan {
  const passes = passesOf(size);
  const roots = createRootsOfUnity(size);
  // mixedRadix turns by 0 − sine; the kernel by its negative, which is −0 where the sine is 0
  for (let i = 1; i < roots.length; i += 2) roots[i] = -(0 - roots[i]!);
  const tables = passes.map(({ radix, part, stride }, number) => {
    if (number === 0) return firstTable(roots, part);
    if (part === 1) return new Float64Array(0);
    const table = new Float64Array(2 * (radix - 1) * part);
    let at = 0;
    for (let p = 0; p < part; p++) {
      for (let j = 1; j < radix; j++) {
        table[at++] = roots[2 * j * p * stride]!;
        table[at++] = roots[2 * j * p * stride + 1]!;
      }
    }
    return table;
  });
  const headBytes = HEADER_BYTES + 16 * passes.length;
  const fifths = createRootsOfUnity(5);
  return {
    bytes: tables.reduce((sum, table) => sum + 8 * table.length, headBytes),
    place(memory, at, scratch, other) {
      new Int32Array(memory, at, 4).set([passes.length, size, scratch, other]);
      const constants = [Math.sqrt(3) / 2, Math.sqrt(0.5), fifths[2]!, fifths[3]!, fifths[4]!, fifths[5]!];
      new Float64Array(memory, at + 16, 6).set(constants);
      let tableAt = at + headBytes;
      passes.forEach(({ radix, part, stride }, number) => {
        new Int32Array(memory, at + HEADER_BYTES + 16 * number, 4).set([radix, part, stride, tableAt]);
        new Float64Array(memory, tableAt, tables[number]!.length).set(tables[number]!);
        tableAt += 8 * tables[number]!.length;
      });
    },
  };
}

/** Turns of two groups side by side: re re im im of the first, second and third turn. */
function firstTable(roots: Float64Array, part: number): Float64Array {
  const table = new Float64Array(6 * part);
  let at = 0;
  for (let p = 0; p < part; p += 2) {
    for (let j = 1; j < 4; j++) {
      table[at++] = roots[2 * j * p]!;
      table[at++] = roots[2 * j * (p + 1)]!;
      table[at++] = roots[2 * j * p + 1]!;
      table[at++] = roots[2 * j * (p + 1) + 1]!;
    }
  }
  return table;
}
