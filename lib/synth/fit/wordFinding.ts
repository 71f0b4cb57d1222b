import { layoutRefusals, vectorRefusals } from '../files/layoutRules';
import type { BenchContent, WaveformContent } from '../types';
import type { Finding, MeasuredLevels } from './types';
import { counted } from './words';

/** The word as a person knows it: short for a row, "12 bit, high byte first", and in full. */
function wordWords(bench: BenchContent): { found: string; inFull: string } {
  if (bench.container === 'csv') return { found: 'decimal numbers', inFull: 'Decimal numbers in CSV' };
  const size = bench.word === 'float32' ? '32 bit float' : `${bench.bits} bit`;
  const order =
    bench.word === 'int8' ? 'one byte' : bench.byteOrder === 'little' ? 'low byte first' : 'high byte first';
  const parts = [size, order];
  if (bench.word === 'int16' && bench.bits < 16) parts.push(`${bench.align}-aligned`);
  if (bench.numberFormat === 'offsetBinary') parts.push('offset binary');
  if (bench.layout === 'split') parts.push('I and Q apart');
  if (bench.container !== 'raw') parts.push(`in ${bench.container}`);
  return { found: `${size}, ${order}`, inFull: parts.join(', ') };
}

/** Whether the bench's file can hold the vector, and what its full scale cuts. */
export function wordFinding(content: WaveformContent, bench: BenchContent, levels: MeasuredLevels | null): Finding {
  const { found, inFull } = wordWords(bench);
  const saturated = levels?.saturatedComponents ?? null;
  const base = {
    check: 'word',
    title: 'Word',
    unit: 'components',
    limit: 0,
    measured: saturated,
    distance: saturated,
    hard: true,
    found,
  } as const;
  const contradictions = layoutRefusals(bench).map(({ path, words }) => `${path.join('.')} ${words}.`);
  const refusals = [...contradictions, ...vectorRefusals(content, bench).map(({ words }) => words)];
  if (refusals.length > 0)
    return { ...base, verdict: 'misses', byHowMuch: 'no such file can be written', words: refusals.join(' ') };
  if (saturated === 0) return { ...base, verdict: 'meets', byHowMuch: '', words: `${inFull}; nothing saturates.` };
  const isMeant = content.level.reference === 'rms';
  if (saturated === null) {
    // every other reference is no smaller than the largest component, so at or below full scale none can pass it
    return isMeant
      ? {
          ...base,
          verdict: 'cannotJudge',
          byHowMuch: '',
          words: `${inFull}. With the RMS as reference peaks may pass full scale; how many components do is counted when the pack is made.`,
        }
      : {
          ...base,
          measured: 0,
          distance: 0,
          verdict: 'meets',
          byHowMuch: '',
          words: `${inFull}; nothing can saturate, since the peak is scaled to full scale or below.`,
        };
  }
  const beyond = bench.word === 'float32' ? 'stand beyond ±1' : 'are held at full scale';
  return isMeant
    ? {
        ...base,
        verdict: 'meets',
        byHowMuch: '',
        words: `${inFull}. ${counted(saturated, 'component')} ${beyond}, as the RMS reference allows.`,
      }
    : {
        ...base,
        verdict: 'misses',
        byHowMuch: `${counted(saturated, 'component')} too large`,
        words: `${inFull}. ${counted(saturated, 'component')} ${beyond}.`,
      };
}
