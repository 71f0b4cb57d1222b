import { createPeakMeasure, type PeakFigures, type ReductionReport, type WaveformContent } from '@/lib/synth';
import { sampleEngine } from '../sampleEngine.ts';
import { Cancelled, runSteps } from './runSteps.ts';

export const number = (value: number, digits = 6): string => String(Number(value.toPrecision(digits)));
export const decibels = (db: number | null): string => (db === null ? 'none' : `${db.toFixed(2)} dB`);

/** Named values as lines, their names in one column. */
export const rowLines = (rows: [string, string][]): string[] =>
  rows.map(([name, value]) => `  ${name.padEnd(15)} ${value}`);

/** Every figure of a content's peak; `words` stand before how far it is. Throws Cancelled. */
export async function measurePeak(content: WaveformContent, words: string, signal?: AbortSignal): Promise<PeakFigures> {
  const measuring = createPeakMeasure(content, { engine: sampleEngine() });
  const percent = () => Math.floor((100 * measuring.doneSteps) / measuring.totalSteps);
  const isDone = await runSteps(
    () => measuring.step(),
    () => `${words} ${percent()} %`,
    signal,
  );
  if (!isDone) throw new Cancelled();
  return measuring.result();
}

/** What stands beside each other before and after, of one rendering each. */
export function peakRows(figures: PeakFigures, title: string, words: string): [string, string][] {
  const { paprDb, symbolPaprDb, atOneInHundredDb, atOneInThousandDb, occupiedHz, notchDb } = figures;
  const worst = symbolPaprDb.reduce((most, db) => (db > most ? db : most), -Infinity);
  const band = occupiedHz === null ? 'none' : `${number(occupiedHz)} Hz`;
  return [
    [title, `${decibels(paprDb)} over the frame${words}, worst symbol ${decibels(worst === -Infinity ? null : worst)}`],
    ['  CCDF', `1 in 100 above ${decibels(atOneInHundredDb)}, 1 in 1000 above ${decibels(atOneInThousandDb)}`],
    ['  spectrum', `99 % of the power in ${band}${notchDb === null ? '' : `, notch ${decibels(notchDb)}`}`],
  ];
}

export const describePeak = (figures: PeakFigures) => ({
  frameDb: figures.paprDb,
  activeFrameDb: figures.activePaprDb,
  symbolsDb: Array.from(figures.symbolPaprDb, (db) => (Number.isNaN(db) ? null : db)),
  atOneInHundredDb: figures.atOneInHundredDb,
  atOneInThousandDb: figures.atOneInThousandDb,
  occupiedHz: figures.occupiedHz,
  notchDb: figures.notchDb,
});

export const kindWords = { clipAndFilter: 'clip and filter', toneReservation: 'tone reservation' };
const evmWords = (ratio: number | null): string => (ratio === null ? 'none' : `${number(100 * ratio, 3)} %`);

/** What a reduction reached and what it costs. */
export function reductionRows(report: ReductionReport): [string, string][] {
  const verdict = report.isReached ? 'reached' : `not reached, the best is ${decibels(report.reachedPaprDb)}`;
  const passes = report.passes === 1 ? '1 pass' : `${report.passes} passes`;
  return [
    ['peak lowered', `${kindWords[report.kind]}, ${decibels(report.targetPaprDb)} over the mean ${verdict}, ${passes}`],
    [
      'its cost',
      `EVM of the data ${evmWords(report.evm.all.ratio)}, gain fitted ${evmWords(report.evmGainFitted.all.ratio)}, mean power ${decibels(report.meanPowerChangeDb)}`,
    ],
  ];
}

export function describeReduction(report: ReductionReport, content: WaveformContent, before: PeakFigures) {
  const { evm, evmGainFitted, ...figures } = report;
  return {
    ...figures,
    framePaprDbBefore: before.paprDb,
    before: describePeak(before),
    evmDb: evm.all.db,
    evmGainFittedDb: evmGainFitted.all.db,
    inks: content.tray.flatMap(({ inkId, name }, ink) => {
      const figure = evm.byInk[ink];
      return figure && figure.ratio !== null ? [{ inkId, name, evmDb: figure.db }] : [];
    }),
  };
}
