import { fileSamples, fractionToNumber, sampleClock } from '../../numerology';
import type { BenchProfile, Marker, WaveformDocument } from '../../types';
import type { FitFacts } from '../facts';
import { ppmBetween } from '../limits';
import type { FitKnowledge, MeasuredLevels, PlainChange, RemedyKind, RemedyPrice } from '../types';
import { counted, spell, spellSeconds } from '../words';
import { log10 } from '../../math/exponential';

/** What a remedy is sought for. */
export interface Case {
  document: WaveformDocument;
  bench: BenchProfile;
  levels: MeasuredLevels | null;
  known: FitKnowledge;
  facts: FitFacts;
}

/** A remedy before it is tried and priced. */
export interface Draft {
  kind: RemedyKind;
  label: string;
  changes: PlainChange[];
  /** What it does beside its price: whole sentences, may be empty. */
  effect: string;
}

/** Ways to the same end, the best first: the first that holds is offered. */
export type Alternatives = Iterable<Draft>;

/** One change of the document, `before` read at the pointer. */
export function change(document: WaveformDocument, pointer: string, after: unknown): PlainChange {
  const before = pointer
    .split('/')
    .slice(1)
    .reduce<unknown>((value, key) => (value as Record<string, unknown>)[key], document);
  return { pointer, before, after };
}

/** Samples of the file with other repeats. */
export function withRepeats({ content }: WaveformDocument, repeats: number): number {
  return fileSamples({ ...content, timing: { ...content.timing, repeats } });
}

/** Samples that each repeat adds. */
export function samplesOfRepeat(document: WaveformDocument): number {
  return withRepeats(document, 2) - withRepeats(document, 1);
}

/** Samples and ppm between two documents. */
export function priceOf(before: WaveformDocument, after: WaveformDocument): RemedyPrice {
  const [a, b] = [before.content, after.content];
  const clock = sampleClock(a);
  // N and M change the clock and leave the frequencies: only the spacing and the offset move them
  const spacingPpm = ppmBetween(spacingOf(a), spacingOf(b));
  const offsetPpm = (1e6 * (b.frequencyOffsetHz - a.frequencyOffsetHz)) / fractionToNumber(clock);
  const ppm = Math.abs(spacingPpm) >= Math.abs(offsetPpm) ? spacingPpm : offsetPpm;
  return { samples: fileSamples(b) - fileSamples(a), ppm: ppm + 0 };
}

function spacingOf({ subcarrierSpacingHz: [numerator, denominator] }: WaveformDocument['content']) {
  return { numerator: BigInt(numerator), denominator: BigInt(denominator) };
}

/** "The file becomes 61 440 samples, 2.0 times as long." */
export function lengthWords(document: WaveformDocument, samples: number): string {
  return `The file becomes ${spell(samples)} samples, ${spell(samples / fileSamples(document.content), 2)} times as long.`;
}

/** What `more` silent samples at the end do. */
export function silenceWords(document: WaveformDocument, more: number, length: number): string {
  const clockHz = fractionToNumber(sampleClock(document.content));
  const place = document.content.timing.mode === 'loop' ? 'at the wrap' : 'at the end';
  const falls = 10 * log10(length / (length - more));
  const mean = falls < 0.005 ? 'by less than 0.01 dB' : `by ${spell(falls, 2)} dB`;
  return `${spellSeconds(more / clockHz)} of silence ${place}; the mean over the file falls ${mean}.`;
}

/** Marks keep their times at another sample rate; null where one has no whole sample there. */
export function scaledMarkers(markers: readonly Marker[], from: number, to: number): Marker[] | null {
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

/** "Repeat the frame 2 times" */
export function repeatLabel(repeats: number): string {
  return repeats === 1 ? 'Play the frame once' : `Repeat the frame ${counted(repeats, 'time')}`;
}
