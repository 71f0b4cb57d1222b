import { parseBenchProfile } from '@/lib/document/parse';
import type { BenchContent } from '@/lib/synth/index';
import { openBench } from './documents';

const words: Pick<BenchContent, 'word' | 'bits' | 'align'>[] = [
  { word: 'int8', bits: 8, align: 'right' },
  ...[8, 9, 10, 11, 12, 13, 14, 15, 16].flatMap((bits) =>
    (['left', 'right'] as const).map((align) => ({ word: 'int16' as const, bits, align })),
  ),
  { word: 'float32', bits: 16, align: 'right' },
];
const markers: BenchContent['markers'][] = [
  { count: 0, packing: 'none', leastSamples: 1, stepSamples: 1 },
  { count: 4, packing: 'bytes', leastSamples: 1, stepSamples: 1 },
  { count: 4, packing: 'lowBits', leastSamples: 1, stepSamples: 1 },
];

/** Every combination of the layout's fields, whether a file can have it or not. */
export function* allLayouts(): Generator<BenchContent> {
  for (const word of words)
    for (const numberFormat of ['twosComplement', 'offsetBinary'] as const)
      for (const byteOrder of ['little', 'big'] as const)
        for (const layout of ['interleaved', 'split'] as const)
          for (const container of ['raw', 'wav', 'npy', 'csv'] as const)
            for (const swapIq of [false, true])
              for (const negateQ of [false, true])
                for (const marker of markers)
                  yield openBench({
                    ...word,
                    numberFormat,
                    byteOrder,
                    layout,
                    container,
                    swapIq,
                    negateQ,
                    markers: marker,
                  }).content;
}

/** What the schema says of a layout: nothing where a profile may have it. */
export function refusalsOf(content: BenchContent): string[] {
  const parsed = parseBenchProfile(JSON.stringify(openBench(content)));
  return parsed.ok ? [] : parsed.issues.map(({ pointer, message }) => `${pointer} ${message}`);
}
