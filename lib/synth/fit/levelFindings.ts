import { countedPeakDbfs } from '../level/levels';
import { levelCard } from '../level/levelCard';
import type { BenchContent, BenchProfile, WaveformDocument } from '../types';
import type { Finding, MeasuredLevels, SymbolPeaks } from './types';
import { counted, spell } from './words';

/** dB below which two levels count as equal: an analysis in doubles is good to about 1e-12. */
export const LEVEL_SLACK_DB = 1e-9;

/** A symbol this far above the median is marked. */
const OUTSTANDING_DB = 3;

/** Symbols named in a sentence; the rest is counted. */
const NAMED_MOST = 6;

export const NO_LEVELS: MeasuredLevels = {
  fileRmsDbfs: null,
  activeRmsDbfs: null,
  renderedPeakDbfs: null,
  reconstructedPeakDbfs: null,
  saturatedComponents: null,
};

const NOT_MEASURED = 'The waveform has not been measured yet.';

/** What is left below full scale by the larger of rendered and reconstructed peak. */
export function headroomFinding(bench: BenchContent, levels: MeasuredLevels | null, why = NOT_MEASURED): Finding {
  const peak = levels && countedPeakDbfs(levels);
  const least = bench.leastHeadroomDb;
  const base = { check: 'headroom', title: 'Headroom', unit: 'dB', limit: least, hard: false } as const;
  if (!levels || peak === null) {
    return {
      ...base,
      measured: null,
      distance: null,
      verdict: 'cannotJudge',
      byHowMuch: '',
      found: 'not measured',
      words: why,
    };
  }
  const left = -peak;
  const lack = least - left;
  const misses = lack > LEVEL_SLACK_DB;
  const which = levels.reconstructedPeakDbfs === peak ? 'The reconstructed peak' : 'Between samples the peak';
  const wanted = least === 0 ? 'full scale is the limit' : `this bench wants ${spell(least, 2)} dB left`;
  return {
    ...base,
    measured: left,
    distance: misses ? lack : Math.min(0, lack),
    verdict: misses ? 'misses' : 'meets',
    byHowMuch: misses ? (lack < 0.005 ? 'less than 0.01 dB too high' : `${spell(lack, 2)} dB too high`) : '',
    found: `${spell(left, 2)} dB, needs ${spell(least, 2)}`,
    words:
      left < 0
        ? `${which} stands ${spell(-left, 2)} dB above full scale; ${wanted}.`
        : `${which} stands ${spell(left, 2)} dB below full scale; ${wanted}.`,
  };
}

/** Peak and mean at the device's connector, whichever stands closer to its limit, by what the generator's setting means. */
export function levelFinding(
  document: WaveformDocument,
  bench: BenchProfile,
  levels: MeasuredLevels | null,
  why = NOT_MEASURED,
): Finding {
  const card = levelCard(document, bench, levels ?? NO_LEVELS);
  const isMean = card.meanLeftDb !== null && (card.peakLeftDb === null || card.meanLeftDb < card.peakLeftDb);
  const left = isMean ? card.meanLeftDb : card.peakLeftDb;
  const limit = isMean ? card.meanLimitDbm : card.peakLimitDbm;
  const over = left !== null && left < -LEVEL_SLACK_DB;
  const short = over && -left < 0.005 ? 'less than 0.01 dB over' : `${spell(-(left ?? 0), 2)} dB over`;
  const hasLimit = card.peakLimitDbm !== null || card.meanLimitDbm !== null;
  const isUnmeasured = levels === null && hasLimit && document.intent.outputRmsDbm !== null;
  const unknown =
    bench.content.levelMeans === 'unknown'
      ? ' What the setting means is not known: the highest of three readings counts.'
      : '';
  return {
    check: 'level',
    title: 'Level at the device',
    unit: 'dBm',
    hard: false,
    measured: isMean ? card.meanNowDbm : card.peakNowDbm,
    limit,
    distance: left === null ? null : 0 - left,
    verdict: over ? 'misses' : card.verdict === 'noLimit' || left === null ? 'cannotJudge' : 'meets',
    byHowMuch: over ? short : '',
    found: card.peakNowDbm === null ? 'not set' : `peak ${spell(card.peakNowDbm, 2)} dBm`,
    words: isUnmeasured ? why : card.sentence + (card.peakNowDbm === null ? '' : unknown),
  };
}

/** Symbols whose peak stands 3 dB or more above the median: a sequence's own start does that, and the level follows them alone. */
export function symbolPeakFinding(peaks: SymbolPeaks | null, why = NOT_MEASURED): Finding {
  const base = { check: 'symbolPeak', title: 'Symbol peaks', unit: 'dB', limit: OUTSTANDING_DB, hard: false } as const;
  if (peaks === null) {
    return {
      ...base,
      measured: null,
      distance: null,
      verdict: 'cannotJudge',
      byHowMuch: '',
      found: 'not measured',
      words: why,
    };
  }
  const { aboveMedianDb, symbol, outstanding } = peaks;
  const highest = `The highest, in symbol ${spell(symbol)}, stands ${spell(aboveMedianDb, 2)} dB above the median of the symbols' peaks.`;
  const named = outstanding
    .slice(0, NAMED_MOST)
    .map((one) => spell(one))
    .join(', ');
  const rest = outstanding.length - NAMED_MOST;
  return {
    ...base,
    measured: aboveMedianDb,
    distance: aboveMedianDb - OUTSTANDING_DB,
    verdict: outstanding.length > 0 ? 'misses' : 'meets',
    byHowMuch: outstanding.length > 0 ? `${spell(aboveMedianDb, 2)} dB above the median` : '',
    found: `${spell(aboveMedianDb, 2)} dB above the median`,
    words:
      outstanding.length > 0
        ? `${counted(outstanding.length, 'symbol')} ${outstanding.length === 1 ? 'stands' : 'stand'} 3 dB or more above the others: ${named}${rest > 0 ? ` and ${spell(rest)} more` : ''}. ${highest} The whole file is scaled to that peak.`
        : highest,
  };
}
