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
  /** Of the file before its first sample. */
  headBytes: number;
  datasetName: string;
  baseName: string;
  title: string;
  packNote: string;
  symbols: SymbolSpan[];
}

/** Version of SigMF's core namespace that the fields below belong to. */
export const sigmfVersion = '1.0.0';

/**
 * SigMF's name for the words of a profile, or in words why it has none: it knows I before Q, interleaved or not at all, no
 * mirrored spectrum and no bits beside the number, so that other words would be misread in silence. Unsigned types have
 * their zero in the middle of the word. A head is named in bytes (core:header_bytes).
 */
export function sigmfDatatype(bench: BenchContent): { datatype: string } | { missing: string } {
  if (bench.container === 'csv') return { missing: 'SigMF has no type for text' };
  if (bench.layout === 'split') return { missing: 'SigMF has no type for I and Q in two files' };
  if (bench.swapIq) return { missing: 'SigMF has no type for Q before I' };
  if (bench.negateQ) return { missing: 'SigMF has no type for a negated Q' };
  if (bench.markers.packing === 'lowBits') return { missing: 'SigMF has no type for markers in the words' };
  const isOffset = bench.numberFormat === 'offsetBinary';
  const order = bench.byteOrder === 'little' ? 'le' : 'be';
  if (bench.word === 'int8') return { datatype: isOffset ? 'cu8' : 'ci8' };
  if (bench.word === 'float32') return { datatype: `cf32_${order}` };
  if (isOffset && bench.bits < 16 && bench.align === 'right')
    return { missing: `SigMF has no type for ${bench.bits}-bit offset binary aligned to the right` };
  return { datatype: `${isOffset ? 'cu16' : 'ci16'}_${order}` };
}

/**
 * The metadata of the recording: core fields only, no person's name and no core:frequency, since a vector is played at
 * whatever carrier the bench sets. Null where SigMF has no type for the words.
 */
export function sigmfMeta(input: SigmfInput): object | null {
  const found = sigmfDatatype(input.bench);
  if ('missing' in found) return null;
  const standardName = `${input.baseName}.sigmf-data`;
  return {
    global: {
      'core:datatype': found.datatype,
      'core:version': sigmfVersion,
      'core:sample_rate': input.sampleClockHz,
      'core:num_channels': 1,
      'core:sha512': input.sha512Hex,
      ...(input.datasetName === standardName ? {} : { 'core:dataset': input.datasetName }),
      'core:recorder': 'Combwright',
      'core:description': `${input.title}. ${input.packNote}`,
    },
    captures: [{ 'core:sample_start': 0, ...(input.headBytes > 0 ? { 'core:header_bytes': input.headBytes } : {}) }],
    annotations: input.symbols.map((symbol, l) => ({
      'core:sample_start': symbol.startSample,
      'core:sample_count': symbol.samples,
      'core:label': `symbol ${l}`,
    })),
  };
}
