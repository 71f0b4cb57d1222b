import { fileSamples } from '../numerology';
import type { BenchContent, WaveformContent } from '../types';
import { byDistance } from './findingOf';
import { usableMost } from './limits';
import type { Finding } from './types';
import { counted, spell } from './words';

export function granularityFinding(content: WaveformContent, bench: BenchContent): Finding {
  const samples = fileSamples(content);
  const size = bench.granularitySamples;
  const short = (size - (samples % size)) % size;
  const multiple = samples / size;
  return byDistance({
    check: 'granularity',
    title: 'Length',
    unit: 'samples',
    hard: true,
    measured: samples,
    limit: size,
    distance: short,
    byHowMuch: `${counted(short, 'sample')} short`,
    found: size === 1 ? spell(samples) : `${spell(multiple, Number.isInteger(multiple) ? 0 : 2)} × ${spell(size)}`,
    words:
      short === 0
        ? `${counted(samples, 'sample')}, a whole multiple of ${spell(size)}.`
        : `${counted(samples, 'sample')} are ${spell(multiple, Number.isInteger(multiple * 10) ? 1 : 2)} × the granularity of ${spell(size)}. Only whole multiples load.`,
  });
}

export function leastLengthFinding(content: WaveformContent, bench: BenchContent): Finding {
  const samples = fileSamples(content);
  const least = bench.leastSamples;
  return byDistance({
    check: 'leastLength',
    title: 'Shortest length',
    unit: 'samples',
    hard: true,
    measured: samples,
    limit: least,
    distance: least - samples,
    byHowMuch: `${counted(least - samples, 'sample')} short`,
    found: `${spell(samples)}, needs ${spell(least)}`,
    words: `${counted(samples, 'sample')}; the shortest that loads has ${spell(least)}.`,
  });
}

/** The limit is what can be used: the largest multiple of the granularity that the memory holds. */
export function memoryFinding(content: WaveformContent, bench: BenchContent): Finding {
  const samples = fileSamples(content);
  const most = usableMost(bench);
  const holds =
    most === bench.mostSamples
      ? `the memory holds ${spell(most)}`
      : most === 0
        ? `the memory of ${spell(bench.mostSamples)} holds no multiple of ${spell(bench.granularitySamples)}, so nothing loads`
        : `of the memory of ${spell(bench.mostSamples)}, whole multiples of ${spell(bench.granularitySamples)} use ${spell(most)}`;
  return byDistance({
    check: 'memory',
    title: 'Memory',
    unit: 'samples',
    hard: true,
    measured: samples,
    limit: most,
    distance: samples - most,
    byHowMuch: `too long by ${counted(samples - most, 'sample')}`,
    found: `${spell(samples)} of ${spell(most)}`,
    words: `${counted(samples, 'sample')}; ${holds}.`,
  });
}
