import {
  formatFraction,
  formatInteger,
  formatNumber,
  formatQuantity,
  type QuantityText,
} from '@/lib/drawing/quantities';
import type { RevisionFigures } from '@/lib/contracts/waveforms';
import { deriveFigures, pilotReach, type WaveformContent } from '@/lib/synth';

export interface NamedFigure extends QuantityText {
  name: string;
}

/** "160, 144 × 6": a prefix list in runs. */
export function prefixWords(prefixes: readonly number[]): string {
  const runs: [number, number][] = [];
  for (const length of prefixes) {
    const last = runs.at(-1);
    if (last && last[0] === length) last[1]++;
    else runs.push([length, 1]);
  }
  return runs.map(([length, times]) => (times === 1 ? String(length) : `${length} × ${times}`)).join(', ');
}

const percent = (ratio: number | null): QuantityText =>
  ratio === null ? { value: 'none', unit: '' } : { value: formatNumber(100 * ratio, 1), unit: '%' };

/** The figures that follow from the numbers and the grid alone, each with its name. */
export function contentFigures(content: WaveformContent): NamedFigure[] {
  const derived = deriveFigures(content);
  const named = (name: string, figure: QuantityText): NamedFigure => ({ name, ...figure });
  return [
    named('FFT size', { value: formatInteger(content.fftSize), unit: '' }),
    named('Spacing', formatFraction(content.subcarrierSpacingHz)),
    named('Sample clock', formatQuantity(derived.sampleClockHz, 'Hz')),
    named('Loaded', formatQuantity(derived.loadedHz, 'Hz')),
    named('Symbols', { value: formatInteger(content.symbolCount), unit: '' }),
    named('Prefix', { value: prefixWords(content.prefixSamples), unit: '' }),
    named('Frame', formatQuantity(derived.frameTimeSec, 's', 4)),
    named('Bits a frame', { value: formatInteger(derived.bitsPerFrame), unit: '' }),
    named('Painted span', formatQuantity(derived.paintedSpanHz, 'Hz')),
    named('Pilots', percent(derived.pilotOverhead)),
    named('Bit rate', formatQuantity(derived.bitRatePerSec, 'bit/s', 4)),
    named('Usable guard', formatQuantity(derived.usableGuardSec, 's', 3)),
  ];
}

/** "Each pilot symbol alone: 11.1 µs at 1.75 kHz Doppler." One sentence for each way to read the lattice. */
export function reachSentences(content: WaveformContent): string[] {
  const { pairs } = pilotReach(content);
  if (pairs.length === 0) return ['No pilots are painted.'];
  const text = (value: number | null, unit: string) => {
    if (value === null) return 'unlimited';
    const figure = formatQuantity(value, unit, 3);
    return `${figure.value} ${figure.unit}`;
  };
  return pairs.map((pair) => {
    const lead =
      pairs.length === 1 ? 'Follows' : pair.kind === 'eachSymbol' ? 'Each pilot symbol alone:' : 'All shifts together:';
    const delay =
      pair.delayWindowSec === null ? 'no delay (one pilot)' : `delays up to ${text(pair.delayWindowSec, 's')}`;
    const doppler = pair.dopplerHz === null ? 'no Doppler (one pilot symbol)' : `${text(pair.dopplerHz, 'Hz')} Doppler`;
    return `${lead} ${delay}, ${doppler}.`;
  });
}

/** Figures that only a synthesis tells, as the server measured them. */
export function measuredFigures(figures: RevisionFigures): NamedFigure[] {
  const { measured, measureFailed } = figures;
  const db = (value: number | null | undefined): QuantityText =>
    measured === null
      ? { value: measureFailed === null ? 'measuring' : 'not measured', unit: '' }
      : value === null || value === undefined
        ? { value: 'none', unit: '' }
        : { value: formatNumber(value, 2, true), unit: 'dB' };
  const worst = measured?.worstSymbol;
  return [
    { name: 'PAPR', ...db(measured?.paprDb) },
    {
      name: worst === null || worst === undefined ? 'Worst symbol' : `Worst symbol, ${worst}`,
      ...db(measured?.worstSymbolPaprDb),
    },
  ];
}
