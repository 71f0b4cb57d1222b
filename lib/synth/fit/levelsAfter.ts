import { log10 } from '../math/exponential';
import { fileSamples, prefixSum } from '../numerology';
import type { WaveformContent, WaveformDocument } from '../types';
import type { MeasuredLevels, MeasuredWave } from './types';

/** Whether two contents make the same symbols one after the other, at the same rate: only silence, repeats and level may differ. */
function isSameSignal(a: WaveformContent, b: WaveformContent): boolean {
  return (
    a.oversampling === b.oversampling &&
    a.fftSize === b.fftSize &&
    a.symbolCount === b.symbolCount &&
    a.prefixSamples === b.prefixSamples &&
    a.overlapSamples === b.overlapSamples &&
    a.grid === b.grid &&
    a.tray === b.tray &&
    a.streams === b.streams &&
    a.peakReduction === b.peakReduction
  );
}

function areRepeatsAlike(a: WaveformContent, b: WaveformContent): boolean {
  return a.timing.repeats === b.timing.repeats || !b.streams.some((stream) => stream.acrossRepeats === 'continue');
}

/** The share of the file in which symbols play. */
function activeShare(content: WaveformContent): number {
  const frame = (prefixSum(content) + content.symbolCount * content.fftSize) * content.oversampling;
  return (content.timing.repeats * frame) / fileSamples(content);
}

/**
 * What the levels become after a remedy, as far as arithmetic tells; null where only a rendering can. Pad, gap and repeats change the file's
 * mean, and every level with it where the RMS is the reference; another headroom shifts all alike; another spacing changes no sample
 * where there is no frequency offset.
 */
export function levelsAfter(
  measured: MeasuredLevels | null,
  before: WaveformDocument,
  after: WaveformDocument,
): MeasuredLevels | null {
  if (!measured) return null;
  const a = before.content;
  const b = after.content;
  const isSameTurn =
    a.frequencyOffsetHz === b.frequencyOffsetHz &&
    (a.frequencyOffsetHz === 0 || a.subcarrierSpacingHz === b.subcarrierSpacingHz);
  if (!isSameSignal(a, b) || !isSameTurn || a.timing.mode !== b.timing.mode || !areRepeatsAlike(a, b)) return null;
  const { fileRmsDbfs, activeRmsDbfs, renderedPeakDbfs, reconstructedPeakDbfs } = measured;
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

/** What the wave's own figures become: the symbols' peaks stay where the symbols do, the seam has to be looked at again. */
export function waveAfter(
  measured: MeasuredWave | null,
  before: WaveformDocument,
  after: WaveformDocument,
): MeasuredWave | null {
  if (!measured) return null;
  const keeps = isSameSignal(before.content, after.content) && areRepeatsAlike(before.content, after.content);
  return { seam: null, symbolPeaks: keeps ? measured.symbolPeaks : null };
}
