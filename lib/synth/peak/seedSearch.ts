import { demand } from '../errors';
import type { RenderOptions } from '../synthesize/types';
import type { PayloadSource, Stream, WaveformContent } from '../types';
import { createPeakSearch, type PeakSearch } from './search';

/** Seeds to try: `count` of them from `first` on, within what the source takes. */
export interface SeedRange {
  streamId: string;
  first: number;
  count: number;
}

/** The highest seed of a source that has one, the lowest and the one in use; null for the others (zeros, a pattern, uploaded bits). */
export function seedsOf(source: PayloadSource): { least: number; most: number; now: number } | null {
  if (source.kind === 'pn') return { least: 1, most: ((1 << source.stages) >>> 0) - 1, now: source.seed };
  if (source.kind === 'gold') return { least: 0, most: 2147483647, now: source.cInit };
  return null;
}

function withSeed(source: PayloadSource, seed: number): PayloadSource {
  if (source.kind === 'pn') return { ...source, seed };
  return source.kind === 'gold' ? { ...source, cInit: seed } : source;
}

/** The streams with another seed for one of them. */
export function streamsWithSeed(streams: readonly Stream[], streamId: string, seed: number): Stream[] {
  return streams.map((stream) =>
    stream.streamId === streamId ? { ...stream, source: withSeed(stream.source, seed) } : stream,
  );
}

/**
 * Tries the seeds of a range on one payload stream; the other streams stay. The choice is the seed.
 * Throws SynthError `bad_content` for a stream that is not there or has no seed, `bad_index` for a range outside of its seeds.
 */
export function createSeedSearch(
  content: WaveformContent,
  { streamId, first, count }: SeedRange,
  options: Pick<RenderOptions, 'cells' | 'engine'> = {},
): PeakSearch<number> {
  const stream = content.streams.find((candidate) => candidate.streamId === streamId);
  const seeds = stream ? seedsOf(stream.source) : null;
  demand(seeds !== null, 'bad_content', 'This payload has no seed.');
  const isInside = Number.isInteger(first) && Number.isInteger(count) && count >= 1;
  demand(isInside && first >= seeds.least && first + count - 1 <= seeds.most, 'bad_index', 'No such seeds.');
  const choices = Array.from({ length: count }, (_, i) => first + i);
  const contentOf = (seed: number): WaveformContent => ({
    ...content,
    streams: streamsWithSeed(content.streams, streamId, seed),
  });
  return createPeakSearch(content, choices, contentOf, options);
}
