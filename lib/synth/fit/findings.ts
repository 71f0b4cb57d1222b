import type { BenchContent, BenchProfile, WaveformContent, WaveformDocument } from '../types';
import { clockFinding } from './clockFinding';
import { createFacts, type FitFacts } from './facts';
import { granularityFinding, leastLengthFinding, memoryFinding } from './lengthFindings';
import { headroomFinding, levelFinding, symbolPeakFinding } from './levelFindings';
import { markers } from './markerFinding';
import type { Finding, FitCheck, FitKnowledge, MeasuredLevels } from './types';
import { wordFinding } from './wordFinding';
import { payloadFinding, seamFinding, toneFinding } from './wrapFindings';

/** All checks in the order in which they are shown. */
export const CHECKS: readonly FitCheck[] = [
  'clock',
  'granularity',
  'leastLength',
  'memory',
  'mode',
  'word',
  'markers',
  'seam',
  'toneJump',
  'payloadWrap',
  'symbolPeak',
  'headroom',
  'level',
];

/** What one check is judged from. */
export interface Judged {
  document: WaveformDocument;
  bench: BenchProfile;
  levels: MeasuredLevels | null;
  known: FitKnowledge;
  facts: FitFacts;
}

export function judgeOne(check: FitCheck, { document, bench, levels, known, facts }: Judged): Finding {
  const { content } = document;
  const limits = bench.content;
  const why = known.unmeasuredBecause;
  switch (check) {
    case 'clock':
      return clockFinding(content, limits);
    case 'granularity':
      return granularityFinding(content, limits);
    case 'leastLength':
      return leastLengthFinding(content, limits);
    case 'memory':
      return memoryFinding(content, limits);
    case 'mode':
      return modeFinding(content, limits);
    case 'word':
      return wordFinding(content, limits, levels);
    case 'markers':
      return markers(content, limits);
    case 'seam':
      return seamFinding(content, facts, known.wave?.seam ?? null);
    case 'toneJump':
      return toneFinding(content, facts);
    case 'payloadWrap':
      return payloadFinding(content, facts);
    case 'symbolPeak':
      return symbolPeakFinding(known.wave?.symbolPeaks ?? null, why);
    case 'headroom':
      return headroomFinding(limits, levels, why);
    case 'level':
      return levelFinding(document, bench, levels, why);
  }
}

/** Every limit of the bench and the loop's own, in the order in which they are shown. No remedies yet. */
export function judge(
  document: WaveformDocument,
  bench: BenchProfile,
  levels: MeasuredLevels | null,
  known: FitKnowledge = {},
  facts: FitFacts = createFacts(),
): Finding[] {
  return CHECKS.map((check) => judgeOne(check, { document, bench, levels, known, facts }));
}

function modeFinding(content: WaveformContent, limits: BenchContent): Finding {
  const plays = limits.modes.includes(content.timing.mode);
  return {
    check: 'mode',
    title: 'Mode',
    unit: null,
    measured: null,
    limit: null,
    distance: null,
    hard: true,
    verdict: plays ? 'meets' : 'misses',
    byHowMuch: plays ? '' : `no ${content.timing.mode}`,
    found: content.timing.mode,
    words: `The waveform is a ${content.timing.mode}; this bench plays ${limits.modes.join(' and ')}.`,
  };
}
