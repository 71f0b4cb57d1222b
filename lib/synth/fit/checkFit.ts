import { fileSamples, fractionToNumber, sampleClock } from '../numerology';
import type { BenchProfile, WaveformContent, WaveformDocument } from '../types';
import { applyChanges } from './changes';
import { createFacts } from './facts';
import { CHECKS, judgeOne, type Judged } from './findings';
import { levelsAfter, waveAfter } from './levelsAfter';
import { HEADROOM_MOST_DB, MARKER_REACH, OVERSAMPLING_MOST, PAD_MOST, REPEATS_MOST, SAMPLES_MOST } from './limits';
import { markerStarts } from './markerFinding';
import { clockAdvice, clockRemedies } from './remedies/clockRemedies';
import { priceOf, type Alternatives, type Case, type Draft } from './remedies/draft';
import { lengthRemedies, memoryRemedies } from './remedies/lengthRemedies';
import { headroomRemedies, outputRemedies } from './remedies/levelRemedies';
import { markerRemedies } from './remedies/markerRemedies';
import { modeRemedies } from './remedies/modeRemedies';
import { payloadRemedies, seamRemedies, toneRemedies } from './remedies/wrapRemedies';
import type { Finding, FitCheck, FitFinding, FitKnowledge, MeasuredLevels, Remedy, RemedyKind } from './types';
import { priceWords } from './words';

/** Repeats first, then what moves clock or frequencies, then silence; all else keeps its place. */
const ORDER: Record<RemedyKind, number> = {
  repeats: 0,
  dropRepeats: 0,
  payload: 0,
  tones: 0,
  mode: 0,
  markers: 0,
  headroom: 0,
  outputLevel: 0,
  oversampling: 1,
  spacing: 1,
  fftSize: 1,
  offset: 1,
  gap: 2,
  pad: 2,
};

/** A remedy may leave a level that misses a limit no more than a rounding worse. */
const SLACK = 1e-9;

/**
 * Every limit of a bench and of the loop, judged, each miss with the remedies that are one press away, in the order repeats, spacing or M
 * or N, gap or pad. A remedy is offered only where the whole fit of the changed document says so: its finding meets, no finding misses
 * that did not, and no hard limit or level that misses already misses by more (the length's remainder apart). Where levels change in a way that only a
 * rendering can tell, the findings that need them become `cannotJudge` until it is measured anew.
 * `levels` comes from rendering (and reading back), null while nothing was measured; `known` is what else a rendering tells.
 */
export function checkFit(
  document: WaveformDocument,
  bench: BenchProfile,
  levels: MeasuredLevels | null,
  known: FitKnowledge = {},
): FitFinding[] {
  const about: Case = { document, bench, levels, known, facts: createFacts() };
  const found = new Map(CHECKS.map((check) => [check, judgeOne(check, about)]));
  return [...found.values()].map((finding) => {
    const wantsRemedy = finding.verdict === 'misses' || finding.check === 'payloadWrap';
    const remedies: Remedy[] = [];
    for (const alternatives of wantsRemedy ? candidates(finding.check, about) : []) {
      const remedy = firstThatHolds(alternatives, finding.check, about, found);
      if (remedy && !remedies.some((one) => one.label === remedy.label)) remedies.push(remedy);
    }
    remedies.sort((a, b) => ORDER[a.kind] - ORDER[b.kind]);
    const advice =
      finding.check === 'clock' && wantsRemedy ? ` ${clockAdvice(remedies.map((remedy) => remedy.kind))}` : '';
    return { ...finding, words: finding.words + advice, remedies };
  });
}

function candidates(check: FitCheck, about: Case): Alternatives[] {
  switch (check) {
    case 'granularity':
    case 'leastLength':
      return lengthRemedies(about);
    case 'memory':
      return memoryRemedies(about);
    case 'clock':
      return clockRemedies(about);
    case 'mode':
      return modeRemedies(about);
    case 'markers':
      return markerRemedies(about);
    case 'seam':
      return seamRemedies(about);
    case 'toneJump':
      return toneRemedies(about);
    case 'payloadWrap':
      return payloadRemedies(about);
    case 'word':
    case 'headroom':
      return headroomRemedies(about);
    case 'level':
      return outputRemedies(about);
    case 'symbolPeak':
      return []; // lowering a peak is an edit of its own, with its own before and after
  }
}

function firstThatHolds(
  alternatives: Alternatives,
  check: FitCheck,
  about: Case,
  before: ReadonlyMap<FitCheck, Finding>,
): Remedy | null {
  for (const draft of alternatives) {
    const remedy = tried(draft, check, about, before);
    if (remedy) return remedy;
  }
  return null;
}

/** The remedy with its price, or null where the fit of the changed document says no. */
function tried(
  { kind, label, changes, effect }: Draft,
  check: FitCheck,
  about: Case,
  before: ReadonlyMap<FitCheck, Finding>,
): Remedy | null {
  const after = applyChanges(about.document, changes);
  if (!isInRange(after)) return null;
  const now: Judged = {
    ...about,
    document: after,
    levels: levelsAfter(about.levels, about.document, after),
    known: { ...about.known, wave: waveAfter(about.known.wave ?? null, about.document, after) },
  };
  // its own finding first: most drafts fail there or at the plain lengths and clocks
  for (const one of [check, ...CHECKS.filter((other) => other !== check)]) {
    const finding = judgeOne(one, now);
    if (one === check ? finding.verdict !== 'meets' : isWorse(before.get(one)!, finding)) return null;
  }
  if (check === 'payloadWrap' && judgeOne(check, now).limit !== null) return null; // it meets anyway: it has to close
  const price = priceOf(about.document, after);
  return { kind, label, changes, price, cost: `${priceWords(price)}. ${effect}`.trim() };
}

function isWorse(before: Finding, after: Finding): boolean {
  if (after.verdict !== 'misses') return false;
  if (before.verdict !== 'misses') return true;
  const { check, hard } = before;
  const counts = hard ? check !== 'granularity' : check === 'headroom' || check === 'level';
  if (!counts || before.unit !== after.unit) return false;
  return before.distance !== null && after.distance !== null && after.distance > before.distance + SLACK;
}

/** The ranges of the document that a remedy could leave. */
function isInRange({ content }: WaveformDocument): boolean {
  const { timing, oversampling, level, markers } = content;
  const halfClock = fractionToNumber(sampleClock(content)) / 2;
  return (
    timing.padSamples >= 0 &&
    timing.padSamples <= PAD_MOST &&
    timing.gapSamples >= 0 &&
    timing.gapSamples <= PAD_MOST &&
    timing.repeats >= 1 &&
    timing.repeats <= REPEATS_MOST &&
    oversampling >= 1 &&
    oversampling <= OVERSAMPLING_MOST &&
    level.headroomDb <= HEADROOM_MOST_DB &&
    Math.abs(content.frequencyOffsetHz) <= halfClock &&
    markers.every(
      (marker) =>
        Math.abs(marker.offsetSamples) <= MARKER_REACH &&
        marker.lengthSamples >= 1 &&
        marker.lengthSamples <= MARKER_REACH,
    ) &&
    fileSamples(content) <= SAMPLES_MOST &&
    (timing.mode === 'loop' || markers.every((marker) => isInside(content, marker)))
  );
}

/** A burst has no marks past its ends; in a loop they wrap. */
function isInside(content: WaveformContent, marker: WaveformContent['markers'][number]): boolean {
  const most = fileSamples(content) - marker.lengthSamples;
  return markerStarts(content, marker).every((start) => start >= 0 && start <= most);
}
