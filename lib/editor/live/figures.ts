import { deriveFigures, occupiedBandwidth } from '@/lib/synth/index';
import type { PilotReach, Spectrum } from '@/lib/synth/index';
import type { Kept } from './mirror';
import type { FigureId, LiveFigure } from './protocol';

/** True when repeats sound alike, judged by what is painted: a continued payload or a running tone makes them differ. */
function areRepeatsAlike({ content, census }: Kept): boolean {
  if (content.timing.repeats === 1) return true;
  return content.tray.every((ink, place) => {
    if (census.cellsOfInk[place] === 0) return true;
    if (ink.role === 'tone') return !ink.value.continuous;
    if (ink.role !== 'data') return true;
    return content.streams.find(({ streamId }) => streamId === ink.value.streamId)?.acrossRepeats !== 'continue';
  });
}

/** The pair that follows most: the longest window and the highest Doppler belong to one reading of the lattice, named with it. */
function reachFigures(reach: PilotReach): [delaySec: number | null, dopplerHz: number | null, note: string | null] {
  const [pair, other] = reach.pairs;
  if (!pair) return [null, null, null];
  const second =
    other && other.delayWindowSec !== null && other.dopplerHz !== null
      ? `or ${(other.delayWindowSec * 1e6).toFixed(2)} µs at ${(other.dopplerHz / 1e3).toFixed(2)} kHz, across symbols`
      : null;
  return [pair.delayWindowSec, pair.dopplerHz, second];
}

/** The title block's figures. Frame figures are of the first repeat, and say so where repeats differ. */
export function liveFigures(kept: Kept, chosenSymbol: number, average: Spectrum): LiveFigure[] {
  const { content, census, frame, pilots } = kept;
  const derived = deriveFigures(content, census);
  const power = frame.power();
  const isEmpty = derived.usedCells === 0;
  const symbol = Math.min(chosenSymbol, content.symbolCount - 1);
  const symbolPaprDb = frame.symbolPaprDb[symbol]!;
  const ofRepeat = areRepeatsAlike(kept) ? null : `of repeat 1 of ${content.timing.repeats}`;
  const occupied = occupiedBandwidth(average);
  const reach = pilots.reach();
  const [delaySec, dopplerHz, otherPair] = reachFigures(reach);
  const figure = (id: FigureId, name: string, value: number | null, unit: string, note: string | null = null) => ({
    id,
    name,
    value: value !== null && Number.isFinite(value) ? value : null,
    unit,
    note,
  });
  const percent = (ratio: number | null) => (ratio === null ? null : 100 * ratio);
  return [
    figure('paprFrame', 'PAPR', power.paprDb, 'dB', ofRepeat),
    figure('paprSymbol', `PAPR, symbol ${symbol}`, symbolPaprDb, 'dB'),
    figure('rms', 'RMS', isEmpty ? null : Math.sqrt(power.meanPower), '', 'of a full grid at 0 dB: 1'),
    figure('sampleClock', 'Sample clock', derived.sampleClockHz, 'Hz'),
    figure('loadedBand', 'Loaded', isEmpty ? null : derived.loadedHz, 'Hz'),
    figure('paintedSpan', 'Painted span', isEmpty ? null : derived.paintedSpanHz, 'Hz'),
    figure('occupiedBand', '99 % band', occupied?.widthHz ?? null, 'Hz', 'of the rendered samples'),
    figure('symbolTime', 'Symbol', derived.symbolTimeSec, 's'),
    figure('frameTime', 'Frame', derived.frameTimeSec, 's'),
    figure('bitsPerFrame', 'Bits a frame', derived.bitsPerFrame, 'bits'),
    figure('bitRate', 'Bit rate', derived.bitRatePerSec, 'bit/s'),
    figure('efficiency', 'Efficiency', derived.efficiency, 'bit/s/Hz'),
    figure('prefixOverhead', 'Prefix', percent(derived.prefixOverhead), '%'),
    figure('pilotOverhead', 'Pilots', percent(derived.pilotOverhead), '%'),
    figure('usableGuard', 'Usable guard', derived.usableGuardSec, 's'),
    figure('delayReach', 'Pilot reach', delaySec, 's', otherPair ?? (delaySec === null ? null : 'first path known')),
    figure('dopplerReach', 'at Doppler', dopplerHz, 'Hz'),
  ];
}
