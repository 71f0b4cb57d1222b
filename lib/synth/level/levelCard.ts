import type { MeasuredLevels } from '../fit/types';
import { spell } from '../fit/words';
import { fractionToNumber, sampleClock } from '../numerology';
import type { BenchProfile, WaveformContent, WaveformIntent } from '../types';
import { countedPeakDbfs } from './levels';
import type { CardOverrides, CardReading, LevelCard } from './types';

type Means = CardReading['means'];
/** What the sample clock is made of: all of the content that a card needs. */
type ClockNumbers = Pick<WaveformContent, 'fftSize' | 'oversampling' | 'subcarrierSpacingHz'>;

const MEANS_WORDS: Record<Means, string> = {
  fileRms: 'its mean over the whole file',
  activeRms: 'its mean while the frame plays',
  fullScaleTone: 'a full-scale tone',
};

/** A tenth of a dB downwards; a value a rounding below a whole tenth counts as that tenth. */
function downToTenth(value: number): number {
  return Math.floor(value * 10 + 1e-9) / 10;
}

function least(values: (number | null)[]): number | null {
  const given = values.filter((value) => value !== null);
  return given.length === 0 ? null : Math.min(...given);
}

function largest(values: (number | null)[]): number | null {
  const given = values.filter((value) => value !== null);
  return given.length === 0 ? null : Math.max(...given);
}

/**
 * What an operator sets and must not exceed, after the rule of docs/signal.md: peak at the device = L_set + (peak − r) − loss, mean = L_set +
 * (m − r) − loss, with r the file's RMS, the active part's RMS or 0 dBFS as the profile says what a setting means. Unknown: all three
 * readings, the highest level and the lowest setting count. Highest setting: down to a tenth of a dB, over the limits that are given.
 * `overrides` are limits entered on the card for another device, or a setting that was typed; 0 dBm is a level like any other.
 */
export function levelCard(
  document: { content: ClockNumbers; intent: WaveformIntent },
  bench: Pick<BenchProfile, 'content'>,
  measured: MeasuredLevels,
  overrides: CardOverrides = {},
): LevelCard {
  const intent = { ...document.intent, ...withoutUndefined(overrides) };
  const { lossDb, levelToleranceDb, devicePeakLimitDbm: peakLimit, deviceMeanLimitDbm: meanLimit } = intent;
  const peak = countedPeakDbfs(measured);
  const mean = measured.activeRmsDbfs;
  const { levelMeans } = bench.content;
  const means: Means[] = levelMeans === 'unknown' ? ['fileRms', 'activeRms', 'fullScaleTone'] : [levelMeans];
  const referenceOf = (one: Means): number | null =>
    one === 'fileRms' ? measured.fileRmsDbfs : one === 'activeRms' ? mean : 0;

  const wanted = intent.outputRmsDbm;
  const settingFor = (one: Means): number | null => {
    const reference = referenceOf(one);
    return wanted === null || mean === null || reference === null ? null : wanted - (mean - reference) + lossDb;
  };
  const settingDbm = overrides.settingDbm ?? least(means.map(settingFor));

  const readings = means.map((one): CardReading => {
    const reference = referenceOf(one);
    const at = (level: number | null, loss: number): number | null =>
      settingDbm === null || level === null || reference === null ? null : settingDbm + (level - reference) - loss;
    const underLimit = (limit: number | null, level: number | null): number | null =>
      limit === null || level === null || reference === null ? null : limit - (level - reference);
    // a limit that is given but cannot be reckoned with (no level) must not be passed over
    const limits = [underLimit(peakLimit, peak), underLimit(meanLimit, mean)];
    const isWhole = (peakLimit === null || limits[0] !== null) && (meanLimit === null || limits[1] !== null);
    const highest = least(limits);
    return {
      means: one,
      words: MEANS_WORDS[one],
      peakNowDbm: at(peak, lossDb),
      meanNowDbm: at(mean, lossDb),
      peakWithoutAttenuatorDbm: at(peak, 0),
      highestSettingDbm: highest === null || !isWhole ? null : downToTenth(highest + lossDb - levelToleranceDb),
    };
  });
  const peakNowDbm = largest(readings.map((reading) => reading.peakNowDbm));
  const meanNowDbm = largest(readings.map((reading) => reading.meanNowDbm));
  const isHighestWhole = readings.every((reading) => reading.highestSettingDbm !== null);
  const peakLeftDb = peakLimit === null || peakNowDbm === null ? null : peakLimit - peakNowDbm;
  const meanLeftDb = meanLimit === null || meanNowDbm === null ? null : meanLimit - meanNowDbm;
  const card = {
    settingDbm,
    settingWords:
      levelMeans === 'unknown'
        ? 'not known what it means: the highest of three readings counts'
        : MEANS_WORDS[levelMeans],
    levelMeans,
    highestSettingDbm: isHighestWhole ? least(readings.map((reading) => reading.highestSettingDbm)) : null,
    readings,
    peakNowDbm,
    meanNowDbm,
    peakWithoutAttenuatorDbm: largest(readings.map((reading) => reading.peakWithoutAttenuatorDbm)),
    peakLimitDbm: peakLimit,
    meanLimitDbm: meanLimit,
    peakLeftDb,
    meanLeftDb,
    lossDb,
    levelToleranceDb,
    peakDbfs: peak,
    activeRmsDbfs: mean,
    fileRmsDbfs: measured.fileRmsDbfs,
    sampleClockHz: fractionToNumber(sampleClock(document.content)),
  };
  return { ...card, ...verdictOf(card) };
}

function withoutUndefined(overrides: CardOverrides): CardOverrides {
  return Object.fromEntries(Object.entries(overrides).filter(([, value]) => value !== undefined));
}

/** "over by 6.0 dB", never "over by 0.0 dB". */
export function overBy(db: number): string {
  if (db < 0.005) return 'over by less than 0.01 dB';
  return `over by ${spell(db, db < 0.095 ? 2 : 1)} dB`;
}

function verdictOf(
  card: Pick<LevelCard, 'peakLeftDb' | 'meanLeftDb' | 'peakLimitDbm' | 'meanLimitDbm' | 'peakNowDbm'>,
): Pick<LevelCard, 'verdict' | 'sentence'> {
  const { peakLeftDb, meanLeftDb, peakLimitDbm, meanLimitDbm } = card;
  const lack = least([peakLeftDb, meanLeftDb]);
  if (lack !== null && lack < 0) return { verdict: 'over', sentence: `O${overBy(-lack).slice(1)}: do not switch on.` };
  if (peakLimitDbm === null) {
    const mean = meanLeftDb === null ? '' : `${spell(meanLeftDb, 2)} dB left to the mean limit. `;
    return { verdict: 'noLimit', sentence: `${mean}No peak limit given. Ask before you connect.` };
  }
  if (peakLeftDb === null) {
    return { verdict: 'unknown', sentence: 'No level is set: stay at or below the highest setting.' };
  }
  const mean =
    meanLimitDbm === null
      ? 'no mean limit given'
      : meanLeftDb === null
        ? 'the mean is not known'
        : `${spell(meanLeftDb, 2)} dB to the mean`;
  return { verdict: 'inside', sentence: `${spell(peakLeftDb, 2)} dB left to the peak limit, ${mean}.` };
}
