import { deriveFigures } from '../numerology';
import type { BenchContent, WaveformContent } from '../types';
import { csvHead, npyHead, wavHead } from './fileHeads';
import { bytesPerSample } from './layout';

/** One of a vector's files: a head, then every sample in the same number of bytes, then nothing. */
export interface VectorFile {
  /** `vectorI` and `vectorQ`: what the generator takes as I and Q, which swapped components name the other way round. */
  role: 'vector' | 'vectorI' | 'vectorQ';
  /** Stands behind the base name. */
  ending: '' | '-i' | '-q';
  head: Uint8Array;
  bytesPerSample: number;
  wordsPerSample: 1 | 2;
  /** Of the whole file, head in. */
  bytes: number;
}

const NOTHING = new Uint8Array(0);

function headOf(bench: BenchContent, columns: readonly string[], samples: number, clockHz: number): Uint8Array {
  if (bench.container === 'wav') return wavHead(bench, samples, clockHz);
  if (bench.container === 'npy') return npyHead(bench, samples);
  return bench.container === 'csv' ? csvHead(columns) : NOTHING;
}

/**
 * The one file or the two files of `samples` samples in a profile's layout. CSV columns are named I and Q by what they hold.
 * Asks nothing of the layout: see layoutRefusals and vectorRefusals.
 */
export function vectorFilesOf(bench: BenchContent, samples: number, sampleClockHz: number): VectorFile[] {
  const columns = bench.swapIq ? ['Q', 'I'] : ['I', 'Q'];
  const size = bytesPerSample(bench);
  const file = (
    role: VectorFile['role'],
    ending: VectorFile['ending'],
    names: readonly string[],
    wordsPerSample: 1 | 2,
  ): VectorFile => {
    const head = headOf(bench, names, samples, sampleClockHz);
    const own = (size / 2) * wordsPerSample;
    return { role, ending, head, bytesPerSample: own, wordsPerSample, bytes: head.length + samples * own };
  };
  if (bench.layout === 'interleaved') return [file('vector', '', columns, 2)];
  return [file('vectorI', '-i', columns.slice(0, 1), 1), file('vectorQ', '-q', columns.slice(1), 1)];
}

/** The files of a document's vector. */
export function vectorFiles(content: WaveformContent, bench: BenchContent): VectorFile[] {
  const { fileSamples, sampleClockHz } = deriveFigures(content);
  return vectorFilesOf(bench, fileSamples, sampleClockHz);
}

/** Bytes of all files of a vector together, heads in. */
export function vectorBytes(content: WaveformContent, bench: BenchContent): number {
  // a head that its fields cannot hold is refused by vectorRefusals, its length is the same
  return vectorFiles(content, bench).reduce((sum, { bytes }) => sum + bytes, 0);
}
