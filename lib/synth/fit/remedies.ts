import { powerOfDecibels, log10 } from '../math/exponential';
import { fileSamples, fractionToNumber, sampleClock } from '../numerology';
import type { BenchProfile, Marker, WaveformDocument } from '../types';
import { countedPeakDbfs } from '../level/levels';
import { applyChanges } from './changes';
import { loopClosing, payloadClosing, toneJumps } from './closing';
import { judge } from './findings';
import type { FitCheck, FitFinding, MeasuredLevels, PlainChange, Remedy } from './types';
import { counted, spell, spellHz, spellSeconds } from './words';

const REPEATS_MOST = 65536;
const SAMPLES_MOST = 8589934592; // 2^33
const PAD_MOST = 2147483647;
const OVERSAMPLING_MOST = 16;
const HEADROOM_MOST_DB = 60;
const MARKER_REACH = 2147483648;

/** What a remedy is sought for. */
interface Case {
  document: WaveformDocument;
  bench: BenchProfile;
  measured: MeasuredLevels | null;
}

/**
 * Every limit, judged, each miss with the remedies that are one press away. A remedy is offered only when it makes its finding meet and
 * no other finding miss that does not miss already; where levels change in a way that only a rendering can tell, the finding that needs
 * them becomes `cannotJudge` until it is measured anew.
 * `measured` comes from rendering (and reading back); null while nothing was measured.
 */
export function checkFit(
  document: WaveformDocument,
  bench: BenchProfile,
  measured: MeasuredLevels | null,
): FitFinding[] {
  const found = judge(document, bench, measured);
  const about: Case = { document, bench, measured };
  const missing = new Set(found.filter((one) => one.verdict === 'misses').map((one) => one.check));
  return found.map((finding) => {
    const wantsRemedy = finding.verdict === 'misses' || finding.check === 'payloadWrap';
    const offered = wantsRemedy ? candidates(finding.check, about) : [];
    const remedies = offered.filter((remedy) => holds(remedy, finding.check, about, missing));
    return { ...finding, remedies };
  });
}

function holds(remedy: Remedy, check: FitCheck, about: Case, missing: ReadonlySet<FitCheck>): boolean {
  const after = applyChanges(about.document, remedy.changes);
  if (!isInRange(after)) return false;
  const levels = levelsAfter(about.measured, about.document, after);
  return judge(after, about.bench, levels).every((finding) =>
    finding.check === check ? finding.verdict === 'meets' : finding.verdict !== 'misses' || missing.has(finding.check),
  );
}

/** The ranges of the document that a remedy could leave. */
function isInRange({ content }: WaveformDocument): boolean {
  const { timing, oversampling, level, markers } = content;
  const halfClock = fractionToNumber(sampleClock(content)) / 2;
  return (
    timing.padSamples >= 0 &&
    timing.padSamples <= PAD_MOST &&
    timing.repeats >= 1 &&
    timing.repeats <= REPEATS_MOST &&
    oversampling >= 1 &&
    oversampling <= OVERSAMPLING_MOST &&
    level.headroomDb <= HEADROOM_MOST_DB &&
    Math.abs(content.frequencyOffsetHz) <= halfClock &&
    markers.every((marker) => Math.abs(marker.offsetSamples) <= MARKER_REACH && marker.lengthSamples >= 1) &&
    fileSamples(content) <= SAMPLES_MOST
  );
}

/**
 * What the levels become after a remedy, as far as arithmetic tells; null where only a rendering can. Pad and repeats change the file's
 * mean, and every level with it where the RMS is the reference; another headroom shifts all alike.
 */
export function levelsAfter(
  measured: MeasuredLevels | null,
  before: WaveformDocument,
  after: WaveformDocument,
): MeasuredLevels | null {
  if (!measured) return null;
  const a = before.content;
  const b = after.content;
  const isSameSignal =
    a.oversampling === b.oversampling &&
    a.frequencyOffsetHz === b.frequencyOffsetHz &&
    a.tray === b.tray &&
    a.streams === b.streams;
  const isRepeatAlike = !b.streams.some((stream) => stream.acrossRepeats === 'continue');
  if (!isSameSignal || (a.timing.repeats !== b.timing.repeats && !isRepeatAlike)) return null;
  const { fileRmsDbfs, activeRmsDbfs, renderedPeakDbfs, reconstructedPeakDbfs } = measured;
  const activeShare = (content: typeof a): number =>
    (content.timing.repeats * fileSamples({ ...content, timing: { ...content.timing, repeats: 1, padSamples: 0 } })) /
    fileSamples(content);
  const thinner = 10 * log10(activeShare(b) / activeShare(a));
  let shift: number | null = 0;
  let fileShift = thinner;
  if (a.level !== b.level) {
    if (a.level.reference === b.level.reference) shift = a.level.headroomDb - b.level.headroomDb;
    else if (b.level.reference === 'interpolatedPeak' && renderedPeakDbfs !== null) {
      shift = -b.level.headroomDb - renderedPeakDbfs;
    } else shift = null;
  } else if (b.level.reference === 'rms') {
    shift = -thinner;
    fileShift = 0;
  }
  const shifted = (level: number | null, by: number | null): number | null =>
    level === null || by === null ? null : level + by;
  return {
    fileRmsDbfs: a.level !== b.level ? shifted(fileRmsDbfs, shift) : shifted(fileRmsDbfs, fileShift),
    activeRmsDbfs: shifted(activeRmsDbfs, shift),
    renderedPeakDbfs: shifted(renderedPeakDbfs, shift),
    reconstructedPeakDbfs: shifted(reconstructedPeakDbfs, shift),
    saturatedComponents: shift !== null && shift <= 0 && measured.saturatedComponents === 0 ? 0 : null,
  };
}

function candidates(check: FitCheck, about: Case): Remedy[] {
  switch (check) {
    case 'granularity':
    case 'leastLength':
      return lengthRemedies(about);
    case 'clock':
      return clockRemedies(about);
    case 'headroom':
      return headroomRemedies(about);
    case 'seam':
      return seamRemedies(about);
    case 'toneJump':
      return toneRemedies(about);
    case 'payloadWrap':
      return payloadRemedies(about);
    case 'memory':
    case 'mode':
    case 'word':
    case 'markers':
    case 'level':
      return []; // nothing in the waveform mends these at one press
  }
}

function change(document: WaveformDocument, pointer: string, after: unknown): PlainChange {
  const before = pointer
    .split('/')
    .slice(1)
    .reduce<unknown>((value, key) => (value as Record<string, unknown>)[key], document);
  return { pointer, before, after };
}

/** The least allowed length that is at least `samples`. */
function allowedLength(samples: number, bench: BenchProfile): number {
  const { granularitySamples: size, leastSamples } = bench.content;
  return Math.ceil(Math.max(samples, leastSamples) / size) * size;
}

function withRepeats(document: WaveformDocument, repeats: number): number {
  const { content } = document;
  return fileSamples({ ...content, timing: { ...content.timing, repeats } });
}

function repeatCost(document: WaveformDocument, samples: number): string {
  return `The file becomes ${spell(samples)} samples, ${spell(samples / fileSamples(document.content), 1)} times as long.`;
}

function lengthRemedies({ document, bench }: Case): Remedy[] {
  const { timing } = document.content;
  const samples = fileSamples(document.content);
  const clockHz = fractionToNumber(sampleClock(document.content));
  const remedies: Remedy[] = [];
  const one = withRepeats(document, timing.repeats + 1) - samples;
  const mostRepeats = Math.min(
    REPEATS_MOST,
    timing.repeats + Math.floor((Math.min(bench.content.mostSamples, SAMPLES_MOST) - samples) / one),
  );
  for (let repeats = timing.repeats + 1; repeats <= mostRepeats; repeats++) {
    const length = samples + (repeats - timing.repeats) * one;
    if (length !== allowedLength(length, bench)) continue;
    remedies.push({
      label: `Repeat the frame ${counted(repeats, 'time')}: ${spell(length)}`,
      changes: [change(document, '/content/timing/repeats', repeats)],
      cost: repeatCost(document, length),
    });
    break;
  }
  const place = timing.mode === 'loop' ? 'at the wrap' : 'at the end';
  const padded = (repeats: number): void => {
    const before = withRepeats(document, repeats);
    const length = allowedLength(before, bench);
    const more = length - before;
    if (more === 0) return;
    const changes = [change(document, '/content/timing/padSamples', timing.padSamples + more)];
    if (repeats !== timing.repeats) changes.unshift(change(document, '/content/timing/repeats', repeats));
    const silence = `${spellSeconds(more / clockHz)} of silence ${place}; the mean over the file falls by ${spell(10 * log10(length / before), 2)} dB.`;
    remedies.push({
      label:
        repeats === timing.repeats
          ? `Pad with ${counted(more, 'silent sample')}: ${spell(length)}`
          : `Repeat ${counted(repeats, 'time')} and pad with ${spell(more)}: ${spell(length)}`,
      changes,
      cost: repeats === timing.repeats ? silence : `${repeatCost(document, length)} ${silence}`,
    });
  };
  padded(timing.repeats);
  // far below the shortest length a mere pad is mostly silence: repeat first, then fill up
  const fill = timing.repeats + Math.floor((bench.content.leastSamples - samples) / one);
  if (fill > timing.repeats && fill <= REPEATS_MOST) padded(fill);
  return remedies;
}

/** Marks keep their times at another sample rate; null where one has no whole sample there. */
function scaledMarkers(markers: readonly Marker[], from: number, to: number): Marker[] | null {
  const scaled = markers.map((marker) => ({
    ...marker,
    offsetSamples: (marker.offsetSamples * to) / from,
    lengthSamples: (marker.lengthSamples * to) / from,
  }));
  const isWhole = scaled.every(
    (marker) => Number.isInteger(marker.offsetSamples) && Number.isInteger(marker.lengthSamples),
  );
  return isWhole ? scaled : null;
}

function clockRemedies(about: Case): Remedy[] {
  const { document, bench } = about;
  const { oversampling, markers, timing } = document.content;
  const factors = Array.from({ length: OVERSAMPLING_MOST }, (_, i) => i + 1)
    .filter((factor) => factor !== oversampling)
    .sort((a, b) => Math.abs(a - oversampling) - Math.abs(b - oversampling) || a - b);
  const missing = new Set(
    judge(document, bench, about.measured)
      .filter((one) => one.verdict === 'misses')
      .map((one) => one.check),
  );
  for (const factor of factors) {
    const changes = [change(document, '/content/oversampling', factor)];
    const moved = scaledMarkers(markers, oversampling, factor);
    if (!moved) continue;
    if (markers.length > 0) changes.push(change(document, '/content/markers', moved));
    const plainPad = Math.round((timing.padSamples * factor) / oversampling);
    const withPad = (pad: number): PlainChange[] =>
      pad === timing.padSamples ? changes : [...changes, change(document, '/content/timing/padSamples', pad)];
    const length = fileSamples(applyChanges(document, withPad(plainPad)).content);
    for (const pad of new Set([plainPad, plainPad + allowedLength(length, bench) - length])) {
      const all = withPad(pad);
      const hz = fractionToNumber(sampleClock(applyChanges(document, changes).content));
      const remedy: Remedy = {
        label: `Oversample ${counted(factor, 'time')}: ${spellHz(hz)}`,
        changes: all,
        cost: `The file becomes ${spell(length + pad - plainPad)} samples, ${spell((length + pad - plainPad) / fileSamples(document.content), 2)} times as long${pad === plainPad ? '' : `, ${counted(pad - plainPad, 'silent sample')} at its end`}.`,
      };
      if (holds(remedy, 'clock', about, missing)) return [remedy];
    }
  }
  return [];
}

/** Upwards to a tenth of a dB, a rounding above a whole tenth left alone. */
function upToTenth(value: number): number {
  return Math.max(0, Math.ceil(value * 10 - 1e-9) / 10);
}

function headroomRemedies({ document, bench, measured }: Case): Remedy[] {
  const { level } = document.content;
  const peak = measured && countedPeakDbfs(measured);
  if (!measured || peak === null || peak === undefined) return [];
  const wanted = bench.content.leastHeadroomDb;
  if (level.reference === 'interpolatedPeak') {
    const headroomDb = upToTenth(level.headroomDb + wanted + peak);
    return [
      {
        label: `Keep ${spell(headroomDb, 1)} dB of headroom`,
        changes: [change(document, '/content/level', { ...level, headroomDb })],
        cost: `Every level in the file falls by ${spell(headroomDb - level.headroomDb, 2)} dB.`,
      },
    ];
  }
  if (measured.renderedPeakDbfs === null) return [];
  // what reconstruction finds above the interpolated peak stays above it
  const headroomDb = upToTenth(wanted + peak - measured.renderedPeakDbfs);
  const falls = headroomDb + measured.renderedPeakDbfs;
  return [
    {
      label:
        headroomDb === 0
          ? 'Scale on the interpolated peak'
          : `Scale on the interpolated peak, ${spell(headroomDb, 1)} dB below`,
      changes: [change(document, '/content/level', { reference: 'interpolatedPeak', headroomDb })],
      cost: `Every level in the file falls by ${spell(falls, 2)} dB, ${spell(100 * (1 - powerOfDecibels(-falls)), 0)} % of its power.`,
    },
  ];
}

function seamRemedies({ document }: Case): Remedy[] {
  const closing = loopClosing(document.content);
  const remedies: Remedy[] = [
    {
      label: `Move the offset to ${spellHz(closing.nearestOffsetHz)}`,
      changes: [change(document, '/content/frequencyOffsetHz', closing.nearestOffsetHz + 0)],
      cost: `The signal moves by ${spellHz(closing.nearestChangeHz)}.`,
    },
  ];
  if (closing.repeatsThatClose !== null) {
    remedies.push({
      label: `Repeat the frame ${counted(closing.repeatsThatClose, 'time')}`,
      changes: [change(document, '/content/timing/repeats', closing.repeatsThatClose)],
      cost: repeatCost(document, withRepeats(document, closing.repeatsThatClose)),
    });
  }
  return remedies;
}

function toneRemedies({ document }: Case): Remedy[] {
  const inks = toneJumps(document.content).inksBetweenSymbols;
  if (inks.length === 0) return [];
  return [
    {
      label: inks.length === 1 ? 'Let the tone run on' : 'Let the tones run on',
      changes: inks.map((inkId) => change(document, `/content/tray/${inkId.slice(1)}/value/continuous`, true)),
      cost: 'Their phase then differs from symbol to symbol.',
    },
  ];
}

function payloadRemedies({ document }: Case): Remedy[] {
  const { streams, timing } = document.content;
  const open = payloadClosing(document.content).filter((stream) => stream.closes === false && !stream.isFixed);
  if (open.length !== 1 || timing.mode === 'burst') return [];
  const [stream] = open;
  const repeats = stream!.repeatsToClose;
  const place = streams.findIndex((one) => one.streamId === stream!.streamId);
  if (repeats === null || place < 0 || repeats > REPEATS_MOST) return [];
  const changes: PlainChange[] = [];
  if (streams[place]!.acrossRepeats !== 'continue') {
    changes.push(change(document, `/content/streams/${place}/acrossRepeats`, 'continue'));
  }
  if (repeats !== timing.repeats) changes.push(change(document, '/content/timing/repeats', repeats));
  return [
    {
      label: `Continue the payload over ${counted(repeats, 'repeat')}`,
      changes,
      cost: repeatCost(document, withRepeats(document, repeats)),
    },
  ];
}
