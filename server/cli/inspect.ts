import { contentDigest, documentDigest, intentDigest } from '@/lib/document/digest';
import { deriveFigures, interpolationOf, pilotReach } from '@/lib/synth';
import { done, type Outcome } from './outcome.ts';
import { describePeak, describeReduction, measurePeak, number, peakRows, reductionRows, rowLines } from './peakRows.ts';
import { readDocument } from './readInputs.ts';

const share = (ratio: number | null): string => (ratio === null ? 'none' : `${number(100 * ratio, 4)} %`);

/** inspect document.json: figures and digests, without a bench profile and without writing anything. */
export async function inspect(command: { document: string }): Promise<Outcome> {
  const read = await readDocument(command.document);
  if (!read.ok) return read.outcome;
  const document = read.value;
  const { content } = document;
  const figures = deriveFigures(content);
  const reach = pilotReach(content);
  const peak = await measurePeak(content, 'Measuring');
  const reduction =
    peak.reduction === null
      ? null
      : {
          report: peak.reduction,
          before: await measurePeak({ ...content, peakReduction: { kind: 'none' } }, 'Measuring it before lowering'),
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
    ...(reduction === null
      ? []
      : [...peakRows(reduction.before, 'before lowering', ''), ...reductionRows(reduction.report)]),
  ];
  return done([document.about.title, ...rowLines(rows)], {
    title: document.about.title,
    digests,
    figures: { ...figures, sampleClock: [`${numerator}`, `${denominator}`] },
    pilotReach: reach,
    papr: { ...describePeak(peak), interpolation: interpolationOf(content.oversampling) },
    peakReduction: reduction === null ? null : describeReduction(reduction.report, content, reduction.before),
  });
}
