/** What the sample engine's module exports, as far as it is used. Addresses and sizes are bytes in its own memory. */
export interface EngineExports {
  readonly memory: { readonly buffer: ArrayBuffer; grow(pages: number): number };
  /** The kernelVersion of the sources that the module was built from. */
  builtVersion?(): number;
  /** The first byte that is free, a multiple of 4096. */
  freeFrom(): number;
  /**
   * Samples at `to`, in pairs (both real parts, then both imaginary parts, 32 bytes a pair), from `from`'s interleaved bins, of
   * which only 0…low−1 and size−high…size−1 may differ from 0.
   */
  transform(plan: number, from: number, to: number, low: number, high: number): void;
  /** Puts `count` runs of payload cells on their points; with isNext (1, else 0) those of the next symbol, which follow. */
  mapRuns(runs: number, count: number, isNext: number): void;
  /** Adds samples from…from+count−1 of a row of pairs to a level state. */
  measure(state: number, row: number, from: number, count: number): void;
  /**
   * Those samples as 16-bit words; adds to the two counts (components, samples). Writes up to 3 samples' words more. isBounded (1,
   * else 0): no component times scale reaches 2^31.
   */
  integerWords(
    row: number,
    from: number,
    count: number,
    to: number,
    scale: number,
    least: number,
    most: number,
    counts: number,
    isBounded: number,
  ): void;
  /** Those samples as single precision numbers; adds to the two counts what lies beyond ±1. */
  floatWords(row: number, from: number, count: number, to: number, scale: number, counts: number): void;
  /** Interleaved samples to pairs or pairs to interleaved samples, which may be in one place; `pairs` times two samples. */
  regroup(from: number, pairs: number, to: number): void;
}

/** A tenant's place in the engine. */
export interface EngineRoom {
  readonly exports: EngineExports;
  /** Where the tenant's bytes begin, a multiple of 4096. */
  readonly start: number;
  /** Grows with each new tenant: another number than before says that nothing of the tenant's is left in it. */
  readonly tenancy: number;
  /**
   * Size of the transform whose plan (with its scratch room) lies at `start` as createTransformPlan lays it, 0 for none: it outlives its
   * tenant. Who lays another one, or anything else there, says so here.
   */
  planSize: number;
}

/**
 * Instances of the engine's module, a few at most. A tenant may lose its room to another between two calls; it then asks
 * again and lays everything out anew. What it had can always be computed again, so that no bit depends on it.
 */
export interface SampleEngine {
  /** The tenant's room of at least `bytes`, its own as long as nobody else needed it. */
  rent(tenant: object, bytes: number): EngineRoom;
  /** The tenant has no work for now: its room is the first that another may take. It may rent again at any time. */
  rest(tenant: object): void;
}
