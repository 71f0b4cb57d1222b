import { createFrameTally, createSymbolTally, tallySymbol, tallyTail } from '@/lib/synth/index';
import type { FrameTally, SampleEngine, WaveformContent } from '@/lib/synth/index';
import { createWaveform } from './waveform';
import type { Waveform } from './waveform';

/**
 * The frame as it is before its peak is lowered: what targets stand over, and the peaks that it had. Kept by symbol like the frame itself.
 */
export interface PlainFrame {
  readonly waveform: Waveform;
  /** Per symbol over its own mean; NaN where silent. */
  readonly symbolPaprDb: Float64Array;
  refresh(symbol: number): void;
  /** Mean |x|² of the symbols that are not silent, prefixes, ramps and the last suffix in. */
  meanPower(): number;
}

/** Null where the content lowers no peak. */
export function createPlainFrame(
  content: WaveformContent,
  cells: Uint8Array,
  engine?: SampleEngine,
): PlainFrame | null {
  if (content.peakReduction.kind === 'none') return null;
  const waveform = createWaveform({ ...content, peakReduction: { kind: 'none' } }, cells, engine);
  const frame = createFrameTally(content.symbolCount + 1);
  return {
    waveform,
    symbolPaprDb: frame.symbolPaprDb,
    refresh: (symbol) => refreshFrame(frame, waveform, symbol, content),
    meanPower: () => frame.power().activeMeanPower,
  };
}

const tally = createSymbolTally();

/** Takes a symbol's tally anew from its waveform, and the tail's with the last symbol's. */
export function refreshFrame(
  frame: FrameTally,
  waveform: Waveform,
  symbol: number,
  { symbolCount, oversampling }: Pick<WaveformContent, 'symbolCount' | 'oversampling'>,
): void {
  const step = waveform.interpolation / oversampling;
  const previous = waveform.previousOf(symbol);
  const isRamped = waveform.overlapSamples > 0;
  const overlap = isRamped
    ? { ramp: waveform.ramp, previousUseful: previous === null ? null : waveform.useful(previous) }
    : undefined;
  const useful = waveform.useful(symbol);
  tallySymbol(tally, useful, waveform.prefixOf(symbol) * step, overlap);
  const { usefulMeanPower } = tally;
  frame.replace(symbol, tally);
  if (symbol !== symbolCount - 1 || waveform.tailSamples === 0) return;
  tallyTail(tally, useful, waveform.ramp, waveform.tailSamples);
  // as loud or silent as its symbol: it belongs to the mean of the loud ones, or not
  tally.usefulMeanPower = usefulMeanPower;
  frame.replace(symbolCount, tally);
}
