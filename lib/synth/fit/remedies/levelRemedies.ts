import { countedPeakDbfs } from '../../level/levels';
import { levelCard } from '../../level/levelCard';
import { powerOfDecibels } from '../../math/exponential';
import { spell } from '../words';
import { change, type Alternatives, type Case, type Draft } from './draft';

const OUTPUT_LEAST_DBM = -200;

/** Upwards to a tenth of a dB, a rounding above a whole tenth left alone. */
function upToTenth(value: number): number {
  return Math.max(0, Math.ceil(value * 10 - 1e-9) / 10);
}

/** More headroom at the same reference, or the peak between samples as reference: what keeps the author's own meaning comes first. */
export function headroomRemedies({ document, bench, levels }: Case): Alternatives[] {
  const { level } = document.content;
  const peak = levels && countedPeakDbfs(levels);
  if (!levels || peak === null) return [];
  const wanted = bench.content.leastHeadroomDb;
  const more = upToTenth(level.headroomDb + wanted + peak);
  const sameReference: Draft = {
    kind: 'headroom',
    label:
      level.reference === 'rms' ? `Keep the RMS ${spell(more, 1)} dB down` : `Keep ${spell(more, 1)} dB of headroom`,
    changes: [change(document, '/content/level', { ...level, headroomDb: more })],
    effect: `Every level in the file falls by ${spell(more - level.headroomDb, 2)} dB.`,
  };
  if (level.reference === 'interpolatedPeak') return [[sameReference]];
  if (levels.renderedPeakDbfs === null) return level.reference === 'rms' ? [[sameReference]] : [];
  // what reconstruction finds above the interpolated peak stays above it
  const headroomDb = upToTenth(wanted + peak - levels.renderedPeakDbfs);
  const falls = headroomDb + levels.renderedPeakDbfs;
  const onPeak: Draft = {
    kind: 'headroom',
    label:
      headroomDb === 0
        ? 'Scale on the interpolated peak'
        : `Scale on the interpolated peak, ${spell(headroomDb, 1)} dB below`,
    changes: [change(document, '/content/level', { reference: 'interpolatedPeak', headroomDb })],
    effect: `Every level in the file falls by ${spell(falls, 2)} dB, ${spell(100 * (1 - powerOfDecibels(-falls)), 0)} % of its power.`,
  };
  return level.reference === 'rms' ? [[sameReference], [onPeak]] : [[onPeak]];
}

/** The output that the highest setting gives: inside both limits, the tolerance kept for error, down to a tenth of a dB. */
export function outputRemedies({ document, bench, levels }: Case): Alternatives[] {
  const { outputRmsDbm, levelToleranceDb } = document.intent;
  if (outputRmsDbm === null || !levels) return [];
  const card = levelCard(document, bench, levels);
  const lefts = [card.peakLeftDb, card.meanLeftDb].filter((left) => left !== null);
  const over = Math.max(0, ...lefts.map((left) => -left));
  if (over === 0) return [];
  const lower = Math.floor((outputRmsDbm - over - levelToleranceDb) * 10 + 1e-9) / 10;
  if (lower < OUTPUT_LEAST_DBM) return [];
  return [
    [
      {
        kind: 'outputLevel',
        label: `Lower the output to ${spell(lower, 1)} dBm`,
        changes: [change(document, '/intent/outputRmsDbm', lower)],
        effect: `The mean at the device falls by ${spell(outputRmsDbm - lower, 2)} dB; ${spell(levelToleranceDb, 1)} dB are kept for error.`,
      },
    ],
  ];
}
