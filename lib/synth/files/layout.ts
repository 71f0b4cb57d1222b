import { SynthError } from '../errors';
import type { BenchContent } from '../types';

/** Typed arrays use the machine's byte order; files use the profile's. */
export const isHostLittleEndian = new Uint8Array(new Uint16Array([1]).buffer)[0] === 1;

/** Bytes of one sample (I and Q) in the profile's file. */
export function bytesPerSample(bench: Pick<BenchContent, 'word'>): number {
  return bench.word === 'int8' ? 2 : bench.word === 'int16' ? 4 : 8;
}

/** Throws SynthError `not_supported_yet`, naming the field, for a layout that has no writer yet. */
export function demandSupported(bench: BenchContent): void {
  const missing =
    bench.numberFormat !== 'twosComplement'
      ? 'numberFormat'
      : bench.layout !== 'interleaved'
        ? 'layout'
        : bench.container !== 'raw'
          ? 'container'
          : bench.swapIq
            ? 'swapIq'
            : bench.negateQ
              ? 'negateQ'
              : bench.markers.packing === 'lowBits'
                ? 'markers/packing'
                : null;
  if (missing !== null) throw new SynthError('not_supported_yet', `The profile's ${missing} is not built yet.`);
}
