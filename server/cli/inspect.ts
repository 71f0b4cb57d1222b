import { contentDigest, documentDigest, intentDigest } from '@/lib/document/digest';
import {
  createPeakMeasure,
  deriveFigures,
  interpolationOf,
  pilotReach,
  type PeakFigures,
  type ReductionReport,
  type WaveformContent,
} from '@/lib/synth';
import { sampleEngine } from '../sampleEngine.ts';
import { done, type Outcome } from './outcome.ts';
import { readDocument } from './readInputs.ts';

const number = (value: number, digits = 6): string => String(Number(value.toPrecision(digits)));
const share = (ratio: number | null): string => (ratio === null ? 'none' : `${number(100 * ratio, 4)} %`);
const decibels = (db: number | null): string => (db === null ? 'none' : `${db.toFixed(2)} dB`);

/** A person at a terminal sees how far it is; Ctrl-C ends the program, nothing is written. */
function measure(content: WaveformContent, words: string): PeakFigures {
  const measuring = createPeakMeasure(content, { engine: sampleEngine() });
  const isShown = process.stderr.isTTY;
  let shown = Date.now();
  while (measuring.step()) {
    if (!isShown || Date.now() - shown < 200) continue;
    shown = Date.now();
    process.stderr.write(`\r\x1b[K${words} ${Math.floor((100 * measuring.doneSteps) / measuring.totalSteps)} %`);
  }
  if (isShown) process.stderr.write('\r\x1b[K');
  return measuring.result();
}

interface Reduction {
  report: ReductionReport;
  before: PeakFigures;
}

/** What stands beside each other before and after, of one rendering each. */
function peakRows(figures: PeakFigures, title: string, words: string): [string, string][] {
  const { paprDb, symbolPaprDb, atOneInHundredDb, atOneInThousandDb, occupiedHz, notchDb } = figures;
  const worst = symbolPaprDb.reduce((most, db) => (db > most ? db : most), -Infinity);
  const band = occupiedHz === null ? 'none' : `${number(occupiedHz)} Hz`;
  return [
    [title, `${decibels(paprDb)} over the frame${words}, worst symbol ${decibels(worst === -Infinity ? null : worst)}`],
    ['  CCDF', `1 in 100 above ${decibels(atOneInHundredDb)}, 1 in 1000 above ${decibels(atOneInThousandDb)}`],
    ['  spectrum', `99 % of the power in ${band}${notchDb === null ? '' : `, notch ${decibels(notchDb)}`}`],
  ];
}

const describePeak = (figures: PeakFigures) => ({
  frameDb: figures.paprDb,
  activeFrameDb: figures.activePaprDb,
  symbolsDb: Array.from(figures.symbolPaprDb, (db) => (Number.isNaN(db) ? null : db)),
  atOneInHundredDb: figures.atOneInHundredDb,
  atOneInThousandDb: figures.atOneInThousandDb,
  occupiedHz: figures.occupiedHz,
  notchDb: figures.notchDb,
});

const kindWords = { clipAndFilter: 'clip and filter', toneReservation: 'tone reservation' };
const evmWords = (ratio: number | null): string => (ratio === null ? 'none' : `${number(100 * ratio, 3)} %`);

function reductionRows({ report, before }: Reduction): [string, string][] {
  const verdict = report.isReached ? 'reached' : `not reached, the best is ${decibels(report.reachedPaprDb)}`;
  const passes = report.passes === 1 ? '1 pass' : `${report.passes} passes`;
  return [
    ...peakRows(before, 'before lowering', ''),
    ['peak lowered', `${kindWords[report.kind]}, ${decibels(report.targetPaprDb)} over the mean ${verdict}, ${passes}`],
    [
      'its cost',
      `EVM of the data ${evmWords(report.evm.all.ratio)}, gain fitted ${evmWords(report.evmGainFitted.all.ratio)}, mean power ${decibels(report.meanPowerChangeDb)}`,
    ],
  ];
}

function describeReduction({ report, before }: Reduction, content: WaveformContent) {
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

/** inspect document.json: figures and digests, without a bench profile and without writing anything. */
export async function inspect(command: { document: string }): Promise<Outcome> {
  const read = await readDocument(command.document);
  if (!read.ok) return read.outcome;
  const document = read.value;
  const { content } = document;
  const figures = deriveFigures(content);
  const reach = pilotReach(content);
  const peak = measure(content, 'Measuring');
  const reduction =
    peak.reduction === null
      ? null
      : {
          report: peak.reduction,
          before: measure({ ...content, peakReduction: { kind: 'none' } }, 'Measuring it before lowering'),
        };
  const { numerator, denominator } = figures.sampleClock;
  const clock = denominator === 1n ? `${numerator}` : `${numerator}/${denominator}`;
  const digests = {
    contentDigest: contentDigest(content),
    intentDigest: intentDigest(document.intent),
    documentDigest: documentDigest(document),
  };
  const rows: [string, string][] = [
    ['content', digests.contentDigest],
    ['document', digests.documentDigest],
    ['FFT size', `${content.fftSize}, oversampling ${content.oversampling}`],
    ['spacing', `${content.subcarrierSpacingHz.join('/').replace(/\/1$/, '')} Hz`],
    ['sample clock', `${clock} Hz`],
    ['symbols', `${content.symbolCount}, ${content.timing.repeats} repeats, ${content.timing.mode}`],
    ['samples', `${figures.fileSamples}, ${number(figures.fileTimeSec)} s`],
    ['painted span', `${number(figures.paintedSpanHz)} Hz, loaded ${number(figures.loadedHz)} Hz`],
    ['cells', `${figures.usedCells} used: ${figures.dataCells} data, ${figures.pilotCells} pilot`],
    ['bits per frame', `${figures.bitsPerFrame}, before any coding`],
    ['bit rate', `${number(figures.bitRatePerSec)} bit/s`],
    ['efficiency', figures.efficiency === null ? 'none' : `${number(figures.efficiency, 4)} bit/s/Hz`],
    ['overhead', `prefix ${share(figures.prefixOverhead)}, pilots ${share(figures.pilotOverhead)}`],
    ['usable guard', `${number(figures.usableGuardSec)} s`],
    ...reach.pairs.map((pair): [string, string] => [
      "pilots' reach",
      `delay ${pair.delayWindowSec === null ? 'none' : `${number(pair.delayWindowSec)} s`}, Doppler ${pair.dopplerHz === null ? 'none' : `${number(pair.dopplerHz)} Hz`}`,
    ]),
    ...peakRows(peak, 'PAPR', `, interpolated ${interpolationOf(content.oversampling)} times`),
    ...(reduction === null ? [] : reductionRows(reduction)),
  ];
  return done([document.about.title, ...rows.map(([name, value]) => `  ${name.padEnd(15)} ${value}`)], {
    title: document.about.title,
    digests,
    figures: { ...figures, sampleClock: [`${numerator}`, `${denominator}`] },
    pilotReach: reach,
    papr: { ...describePeak(peak), interpolation: interpolationOf(content.oversampling) },
    peakReduction: reduction === null ? null : describeReduction(reduction, content),
  });
}
