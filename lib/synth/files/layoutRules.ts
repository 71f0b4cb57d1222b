import { deriveFigures } from '../numerology';
import type { BenchContent, WaveformContent } from '../types';
import { shiftBits } from './layout';
import { vectorBytes } from './vectorFiles';

/** A combination that no file can have, in words, at the field that has to change. */
export interface LayoutRefusal {
  /** Keys from the profile's content down. */
  path: string[];
  /** What the field must be and why; of a vector that does not fit a right profile, a whole sentence. */
  words: string;
  /** Why alone, as a sentence. */
  reason: string;
}

type Layout = Pick<
  BenchContent,
  'word' | 'numberFormat' | 'byteOrder' | 'layout' | 'container' | 'bits' | 'align' | 'fileName'
>;

/**
 * What a profile's layout fields contradict each other in; empty where a file can be written. WAV: RIFF is little-endian,
 * its 8-bit words are unsigned and its 16-bit words signed (Multimedia Programming Interface and Data Specifications 1.0),
 * and I and Q are its two channels. CSV: decimal numbers, full scale 1.
 */
export function layoutRefusals(bench: Layout): LayoutRefusal[] {
  const refusals: LayoutRefusal[] = [];
  const refuse = (isRefused: boolean, key: string | string[], demand: string, reason: string): void => {
    if (isRefused)
      refusals.push({ path: Array.isArray(key) ? key : [key], words: `${demand}: ${reason}`, reason: `${reason}.` });
  };
  if (bench.container === 'wav') {
    const isOffset = bench.numberFormat === 'offsetBinary';
    refuse(
      bench.layout === 'split',
      'layout',
      'must be "interleaved" in WAV',
      'I and Q are the two channels of one WAV file',
    );
    refuse(bench.byteOrder === 'big', 'byteOrder', 'must be "little" in WAV', 'WAV stores the low byte first');
    refuse(
      bench.word === 'int8' && !isOffset,
      'numberFormat',
      'must be "offsetBinary"',
      '8-bit words in WAV are unsigned',
    );
    refuse(
      bench.word === 'int16' && isOffset,
      'numberFormat',
      'must be "twosComplement"',
      '16-bit words in WAV are signed',
    );
  }
  refuse(
    bench.container === 'csv' && bench.word !== 'float32',
    'word',
    'must be "float32" in CSV',
    'CSV holds decimal numbers, full scale 1.0, which are floats',
  );
  refuse(
    bench.fileName.extension === 'sigmf-meta',
    ['fileName', 'extension'],
    'must not be "sigmf-meta"',
    'the metadata beside the vector has that name',
  );
  return refusals;
}

/** A RIFF length is 32 bits, and so is the clock in whole hertz. */
const WAV_BYTES = 4294967296;

/** Low bits that are free for markers in the two words of a sample. */
export function freeMarkerBits(bench: Pick<BenchContent, 'word' | 'align' | 'bits'>): number {
  return 2 * shiftBits(bench);
}

/**
 * What a document's vector cannot have in a profile's file, though the profile is right; known before anything is rendered.
 * `path` leads into the profile's content.
 */
export function vectorRefusals(content: WaveformContent, bench: BenchContent): LayoutRefusal[] {
  const refusals: LayoutRefusal[] = [];
  if (bench.container === 'wav') {
    const bytes = vectorBytes(content, bench);
    if (bytes >= WAV_BYTES) {
      const words = `The vector would have ${bytes} bytes, a WAV file has at most ${WAV_BYTES - 1}: choose raw or npy, or fewer samples.`;
      refusals.push({ path: ['container'], words, reason: words });
    }
    const { sampleClockHz } = deriveFigures(content);
    if (Math.round(sampleClockHz) >= WAV_BYTES || sampleClockHz < 0.5) {
      const words = `A WAV header holds clocks of 1 to ${WAV_BYTES - 1} whole hertz, this one is ${sampleClockHz} Hz: choose raw or npy.`;
      refusals.push({ path: ['container'], words, reason: words });
    }
  }
  if (bench.markers.packing === 'lowBits' && content.markers.length > freeMarkerBits(bench)) {
    const words = `${content.markers.length} markers need as many low bits, the two words of a sample leave ${freeMarkerBits(bench)}: use fewer markers, fewer bits, or markers as bytes.`;
    refusals.push({ path: ['markers', 'packing'], words, reason: words });
  }
  return refusals;
}
