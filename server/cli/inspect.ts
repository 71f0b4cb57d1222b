import { contentDigest, documentDigest, intentDigest } from '@/lib/document/digest';
import {
  createFrameMeasure,
  createReductionMeasure,
  deriveFigures,
  interpolationOf,
  pilotReach,
  type ReductionReport,
  type WaveformContent,
} from '@/lib/synth';
import { sampleEngine } from '../sampleEngine.ts';
import { done, type Outcome } from './outcome.ts';
import { readDocument } from './readInputs.ts';

const number = (value: number, digits = 6): string => String(Number(value.toPrecision(digits)));
const share = (ratio: number | null): string => (ratio === null ? 'none' : `${number(100 * ratio, 4)} %`);
const decibels = (db: number | null): string => (db === null ? 'none' : `${db.toFixed(2)} dB`);

function measureFrame(content: WaveformContent) {
  const measuring = createFrameMeasure(content, { engine: sampleEngine() });
  while (measuring.step());
  return measuring.result();
}

interface Reduction {
  report: ReductionReport;
  /** Of the frame, over its own mean before and after. */
  framePaprDbBefore: number | null;
}

function measureReduction(content: WaveformContent): Reduction | null {
  const measuring = createReductionMeasure(content, { engine: sampleEngine() });
  if (measuring === null) return null;
  while (measuring.step());
  const before = measureFrame({ ...content, peakReduction: { kind: 'none' } });
  return { report: measuring.result(), framePaprDbBefore: before.power.paprDb };
}

const kindWords = { clipAndFilter: 'clip and filter', toneReservation: 'tone reservation' };
const evmWords = (ratio: number | null): string => (ratio === null ? 'none' : `${number(100 * ratio, 3)} %`);

function reductionRows({ report, framePaprDbBefore }: Reduction): [string, string][] {
  const verdict = report.isReached ? 'reached' : `not reached, the best is ${decibels(report.reachedPaprDb)}`;
  const passes = report.passes === 1 ? '1 pass' : `${report.passes} passes`;
  return [
    ['before lowering', `${decibels(framePaprDbBefore)} over the frame`],
    ['peak lowered', `${kindWords[report.kind]}, ${decibels(report.targetPaprDb)} over the mean ${verdict}, ${passes}`],
    [
      'its cost',
      `EVM of the data ${evmWords(report.evm.all.ratio)}, gain fitted ${evmWords(report.evmGainFitted.all.ratio)}, mean power ${decibels(report.meanPowerChangeDb)}`,
    ],
  ];
}

function describeReduction({ report, framePaprDbBefore }: Reduction, content: WaveformContent) {
  const { evm, evmGainFitted, ...figures } = report;
  return {
    ...figures,
    framePaprDbBefore,
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
  const frame = measureFrame(content);
  const reduction = measureReduction(content);
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
    [
      'PAPR',
      `${decibels(frame.power.paprDb)} over the frame, interpolated ${interpolationOf(content.oversampling)} times`,
    ],
    ...(reduction === null ? [] : reductionRows(reduction)),
  ];
  return done([document.about.title, ...rows.map(([name, value]) => `  ${name.padEnd(15)} ${value}`)], {
    title: document.about.title,
    digests,
    figures: { ...figures, sampleClock: [`${numerator}`, `${denominator}`] },
    pilotReach: reach,
    papr: {
      frameDb: frame.power.paprDb,
      activeFrameDb: frame.power.activePaprDb,
      interpolation: frame.interpolation,
    },
    peakReduction: reduction === null ? null : describeReduction(reduction, content),
  });
}
