import type { BenchContent } from '@/lib/synth';

/** One annotation: a symbol of the first repeat, in output samples from the file's first. */
export interface SymbolSpan {
  startSample: number;
  samples: number;
}

export interface SigmfInput {
  bench: BenchContent;
  sampleClockHz: number;
  sha512Hex: string;
  datasetName: string;
  baseName: string;
  title: string;
  packNote: string;
  symbols: SymbolSpan[];
}

/** Version of SigMF's core namespace that the fields below belong to. */
export const sigmfVersion = '1.0.0';

/**
 * SigMF's name for the words of a profile, or null where SigMF has none: it knows I before Q, interleaved or not at all,
 * and no mirrored spectrum, so that swapped or negated components would be misread in silence.
 */
export function sigmfDatatype(bench: BenchContent): string | null {
  const plain = bench.container === 'raw' && bench.layout === 'interleaved' && bench.numberFormat === 'twosComplement';
  if (!plain || bench.swapIq || bench.negateQ || bench.markers.packing === 'lowBits') return null;
  if (bench.word === 'int8') return 'ci8';
  return `${bench.word === 'float32' ? 'cf32' : 'ci16'}_${bench.byteOrder === 'little' ? 'le' : 'be'}`;
}

/**
 * The metadata of the recording: core fields only, no person's name and no core:frequency, since a vector is played at
 * whatever carrier the bench sets. Null where SigMF has no type for the words.
 */
export function sigmfMeta(input: SigmfInput): object | null {
  const datatype = sigmfDatatype(input.bench);
  if (datatype === null) return null;
  const standardName = `${input.baseName}.sigmf-data`;
  return {
    global: {
      'core:datatype': datatype,
      'core:version': sigmfVersion,
      'core:sample_rate': input.sampleClockHz,
      'core:num_channels': 1,
      'core:sha512': input.sha512Hex,
      ...(input.datasetName === standardName ? {} : { 'core:dataset': input.datasetName }),
      'core:recorder': 'Combwright',
      'core:description': `${input.title}. ${input.packNote}`,
    },
    captures: [{ 'core:sample_start': 0 }],
    annotations: input.symbols.map((symbol, l) => ({
      'core:sample_start': symbol.startSample,
      'core:sample_count': symbol.samples,
      'core:label': `symbol ${l}`,
    })),
  };
}
