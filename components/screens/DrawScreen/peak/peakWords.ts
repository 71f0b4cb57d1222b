import { formatInteger, formatNumber } from '@/lib/drawing/quantities';
import type { PeakAsk, PeakResult } from '@/lib/editor/live/peakJob';
import type { Settings } from '@/lib/editor/types';
import { seedsOf, type PeakFigures } from '@/lib/synth';

export type WayId = 'phases' | 'seed' | 'toneReservation' | 'clipAndFilter';
export const WAYS: readonly WayId[] = ['phases', 'seed', 'toneReservation', 'clipAndFilter'];

export const WAY_NAMES: Record<WayId, string> = {
  phases: 'Phases of pilots and tones',
  seed: 'Payload seed',
  toneReservation: 'Tone reservation',
  clipAndFilter: 'Clip and filter',
};

/** What the button that does it says. */
export const APPLY_WORDS: Record<WayId, string> = {
  phases: 'Apply phases',
  seed: 'Apply seed',
  toneReservation: 'Apply tone reservation',
  clipAndFilter: 'Apply clip and filter',
};

/** The blanks of the ways. */
export interface PeakBlanks {
  streamId: string;
  firstSeed: number;
  tries: number;
  toneTargetDb: number;
  tonePasses: number;
  clipTargetDb: number;
  clipPasses: number;
}

const db = (value: number) => formatNumber(value, 2, true);
const plural = (count: number, one: string, many: string) => `${formatInteger(count)} ${count === 1 ? one : many}`;

/** Cells of each ink by its place in the tray. */
type Census = ArrayLike<number>;

const cellsOfRole = (settings: Settings, cells: Census, role: string) =>
  settings.tray.reduce((sum, ink, place) => sum + (ink.role === role ? cells[place]! : 0), 0);

/** Streams with a seed that painted cells use, as the form offers them. */
export function seededStreams({ tray, streams }: Settings, cells: Census) {
  return streams.flatMap(({ streamId, name, source }) => {
    const seeds = seedsOf(source);
    const isUsed = tray.some(
      (ink, place) => ink.role === 'data' && ink.value.streamId === streamId && cells[place]! > 0,
    );
    return seeds && isUsed ? [{ streamId, name, ...seeds }] : [];
  });
}

/** Why a way cannot be tried on this drawing; null where it can. */
export function missingFor(way: WayId, settings: Settings, cells: Census): string | null {
  const has = (role: string) => cellsOfRole(settings, cells, role) > 0;
  switch (way) {
    case 'phases':
      return has('pilot') || has('tone') ? null : 'No pilots and no tones. Paint some first.';
    case 'seed':
      return seededStreams(settings, cells).length > 0 ? null : 'No payload with a seed is painted.';
    case 'toneReservation':
      return has('reserved') ? null : 'No reserved cells. Paint some first.';
    case 'clipAndFilter':
      return has('data') || has('reserved') ? null : 'No data cells: pilots and tones stay as they are.';
  }
}

const rounded = (value: number) => Math.round(value * 10) / 10;
const inTargets = (value: number) => Math.max(3, Math.min(20, rounded(value)));

/** Blanks to begin with: the document's own reduction, else a little under the limit, since a peak grows back after its last pass. */
export function firstBlanks({ peakReduction, ...settings }: Settings, cells: Census, limitDb: number): PeakBlanks {
  const [stream] = seededStreams({ peakReduction, ...settings }, cells);
  const tone = peakReduction.kind === 'toneReservation' ? peakReduction : null;
  const clip = peakReduction.kind === 'clipAndFilter' ? peakReduction : null;
  return {
    streamId: stream?.streamId ?? '',
    firstSeed: stream?.least ?? 1,
    tries: stream ? Math.min(100, stream.most - stream.least + 1) : 100,
    toneTargetDb: tone?.targetPaprDb ?? inTargets(limitDb - 1.1),
    tonePasses: tone?.iterations ?? 40,
    clipTargetDb: clip?.targetPaprDb ?? inTargets(limitDb - 1.1),
    clipPasses: clip?.iterations ?? 4,
  };
}

export function askOf(way: WayId, blanks: PeakBlanks): PeakAsk {
  switch (way) {
    case 'phases':
      return { way };
    case 'seed':
      return { way, streamId: blanks.streamId, first: blanks.firstSeed, count: blanks.tries };
    case 'toneReservation':
      return { way, targetPaprDb: blanks.toneTargetDb, iterations: blanks.tonePasses };
    case 'clipAndFilter':
      return { way, targetPaprDb: blanks.clipTargetDb, iterations: blanks.clipPasses };
  }
}

/** "meets 9.5" or "over by 0.37". */
export function verdictOf(paprDb: number, limitDb: number): { words: string; isMet: boolean } {
  const over = paprDb - limitDb;
  if (over <= 0) return { words: `meets ${formatNumber(limitDb, 2)}`, isMet: true };
  return { words: `over by ${over < 0.005 ? formatNumber(over, 4) : db(over)}`, isMet: false };
}

const percent = (ratio: number) => `${formatNumber(100 * ratio, 2, true)} %`;

/** The cost of a way in one line of words; `cells` counts its changed cells where it changes some. */
export function costLine(result: PeakResult, settings: Settings): string {
  const { ask, phases, seed, tried, figures } = result;
  const { reduction } = figures;
  if (ask.way === 'phases') {
    if (!phases) return `No better phases in ${plural(tried, 'try', 'tries')}.`;
    const rule = phases.rule === 'newman' ? 'Newman' : 'Schroeder';
    const parts = [
      ...(phases.ruledCells > 0 ? [`${rule} on ${plural(phases.ruledCells, 'cell', 'cells')}`] : []),
      ...(phases.hasSingles ? [`tone at ${phases.toneDeg}°`] : []),
    ];
    return `${parts.join(', ')}. EVM 0.`;
  }
  if (ask.way === 'seed') {
    if (seed === null) return `No better seed in ${plural(tried, 'try', 'tries')}.`;
    return `Seed ${formatInteger(seed)}, the best of ${formatInteger(tried)}. The bits change, EVM 0.`;
  }
  if (!reduction) return '';
  const missed = reduction.isReached
    ? ''
    : ` Target ${formatNumber(reduction.targetPaprDb, 1)} not reached: ${db(reduction.reachedPaprDb!)} is the best.`;
  if (reduction.kind === 'toneReservation') {
    const strongest = reduction.strongestFilledDb;
    const filled = plural(reduction.filledCells, 'reserved cell', 'reserved cells');
    const most = strongest === null ? '' : `, one cell ${signed(strongest, 1)} dB`;
    return `Fills ${filled}: mean ${signed(reduction.meanPowerChangeDb ?? 0, 2)} dB${most}.${missed}`;
  }
  const known = settings.tray.some(({ role }) => role === 'pilot' || role === 'tone');
  const evm = reduction.evm.all.ratio;
  const stays = known ? ' Pilots and tones stay.' : '';
  return `Changes the data cells: EVM ${evm === null ? 'none' : percent(evm)}.${stays}${missed}`;
}

export const signed = (value: number, decimals: number) =>
  `${value > 0 ? '+' : ''}${formatNumber(value, decimals, true)}`;

export interface CostRow {
  name: string;
  value: string;
  unit: string;
}

/** The cost in full: EVM in all, gain fitted and of the inks that differ most, then what else moved. */
export function costRows(now: PeakFigures, after: PeakFigures, settings: Settings): CostRow[] {
  const rows: CostRow[] = [];
  const evm = after.reduction?.evm;
  const share = (name: string, ratio: number | null | undefined) => {
    if (ratio !== null && ratio !== undefined)
      rows.push({ name, value: formatNumber(100 * ratio, 2, true), unit: '%' });
  };
  if (evm && evm.all.ratio !== null) {
    share('EVM, all data', evm.all.ratio);
    share('gain fitted', after.reduction!.evmGainFitted.all.ratio);
    const inks = settings.tray
      .map((ink, place) => ({ name: ink.name, ratio: evm.byInk[place]?.ratio ?? null }))
      .filter((one): one is { name: string; ratio: number } => one.ratio !== null)
      .sort((a, b) => a.ratio - b.ratio);
    if (inks.length > 1) {
      share(inks[0]!.name, inks[0]!.ratio);
      share(inks.at(-1)!.name, inks.at(-1)!.ratio);
    }
  } else rows.push({ name: 'EVM', value: '0', unit: '%' });
  const change = now.meanPower > 0 && after.meanPower > 0 ? 10 * Math.log10(after.meanPower / now.meanPower) : 0;
  rows.push({ name: 'Mean power', value: signed(change, 2), unit: 'dB' });
  const level = (name: string, value: number | null) => {
    if (value !== null) rows.push({ name, value: db(value), unit: 'dB' });
  };
  level('1 in 100 above', after.atOneInHundredDb);
  level('1 in 1000 above', after.atOneInThousandDb);
  level('Notch', after.notchDb);
  if (after.occupiedHz !== null)
    rows.push({ name: '99 % band', value: formatNumber(after.occupiedHz / 1e6, 3), unit: 'MHz' });
  if (after.worstSymbol !== null)
    rows.push({ name: 'Worst symbol', value: formatInteger(after.worstSymbol), unit: '' });
  return rows;
}

/** One axis for all that compete: whole dB round now, after and limit. */
export function axisOf(values: readonly number[]): { from: number; to: number } {
  const least = Math.min(...values);
  const most = Math.max(...values);
  return { from: Math.floor(2 * (least - 0.3)) / 2, to: Math.max(Math.ceil(2 * (most + 0.2)) / 2, least + 1) };
}
