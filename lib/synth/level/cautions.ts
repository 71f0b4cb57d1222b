import { spell, spellSigned } from '../fit/words';
import { overBy } from './levelCard';
import type { Caution, LevelCard } from './types';

/** What the tenth point names. */
export interface CardContext {
  state: 'draft' | 'in review' | 'released' | 'withdrawn';
  edition: number | null;
  /** Digest of the vector (hexadecimal); its first eight digits are shown. */
  digest: string;
  /** When this card was fetched, in the reader's words; null on the pack's own card, which knows no clock. */
  fetched: string | null;
}

/**
 * The eleven cautions of a pack, in their order, with the card's numbers. Points 1 and 2 are the card itself; 1 to 4 stay in view on a
 * phone. A limit that is not given is said, never passed over.
 */
export function cautions(card: LevelCard, context: CardContext): Caution[] {
  const texts: [text: string, severe: boolean][] = [
    highest(card),
    now(card),
    [
      'Output off while a file, level or frequency changes. Start low and raise: a new file has a new peak at the same setting.',
      false,
    ],
    attenuator(card),
    [limitsAtPeak(card), false],
    ['Watch overload and unlevelled warnings. Hold automatic level control for bursts.', false],
    ['Terminate open ports, block DC, and mind power coming back.', false],
    [
      `An amplifier's output peak is its input peak${card.peakNowDbm === null ? '' : `, ${dbm(card.peakNowDbm, 2)},`} plus its gain. Rate the load for it.`,
      false,
    ],
    [
      'Licence or shielded enclosure before anything radiates; exposure limits and local rules hold. Cable only for layouts that look like a base station.',
      false,
    ],
    stamp(context),
    ["This card replaces neither the instrument's manual nor local rules nor licensed practice.", false],
  ];
  return texts.map(([text, severe], i) => ({ number: i + 1, text, severe }));
}

function dbm(value: number, decimals: number): string {
  return `${spellSigned(value, decimals)} dBm`;
}

function highest(card: LevelCard): [string, boolean] {
  const means =
    card.levelMeans === 'unknown'
      ? 'What the setting on the generator means is not known: the highest of three readings counts.'
      : `The setting on the generator is ${card.settingWords}.`;
  const limits = [
    card.peakLimitDbm === null ? 'no peak limit given' : `peak limit ${dbm(card.peakLimitDbm, 2)}`,
    card.meanLimitDbm === null ? 'no mean limit given' : `mean limit ${dbm(card.meanLimitDbm, 2)}`,
  ].join(', ');
  if (card.peakLimitDbm === null && card.meanLimitDbm === null) {
    return [`No limit given: no highest setting can be told. Ask before you connect. ${means}`, true];
  }
  const setting =
    card.highestSettingDbm === null
      ? 'Highest setting not known'
      : `Highest setting ${dbm(card.highestSettingDbm, 1)}, ${spell(card.levelToleranceDb, 1)} dB kept for error`;
  return [`${setting} (${limits}). ${means}`, card.peakLimitDbm === null || card.highestSettingDbm === null];
}

function now(card: LevelCard): [string, boolean] {
  const peak = card.peakNowDbm === null ? 'Peak now not known' : `Peak now ${dbm(card.peakNowDbm, 2)}`;
  return [`${peak} at the device's connector. ${card.sentence}`, card.verdict !== 'inside'];
}

function attenuator(card: LevelCard): [string, boolean] {
  const peak = card.peakWithoutAttenuatorDbm;
  if (peak === null) return [`Attenuator first: ${spell(card.lossDb, 1)} dB stand before the device.`, false];
  const level = `Without it the peak is ${dbm(peak, 1)}`;
  if (card.peakLimitDbm === null) return [`Attenuator first. ${level}, and no limit is given.`, true];
  const over = peak - card.peakLimitDbm;
  return over > 0
    ? [`Attenuator first. ${level}, ${overBy(over)}.`, true]
    : [`Attenuator first. ${level}, ${spell(-over, 1)} dB below the limit.`, false];
}

function limitsAtPeak(card: LevelCard): string {
  const { peakDbfs, activeRmsDbfs, fileRmsDbfs } = card;
  const above =
    peakDbfs === null || activeRmsDbfs === null ? '' : `, ${spell(peakDbfs - activeRmsDbfs, 2)} dB above the mean`;
  const gap = activeRmsDbfs === null || fileRmsDbfs === null ? 0 : activeRmsDbfs - fileRmsDbfs;
  const gaps = gap >= 0.005 ? `by ${spell(gap, 2)} dB more in this file's gaps` : 'lower still with gaps';
  return `Limits of analyser, meter, coupler and load hold at the peak${above}. Average meters read lower, ${gaps}.`;
}

function stamp(context: CardContext): [string, boolean] {
  const state = context.state === 'in review' ? 'In review' : context.state[0]!.toUpperCase() + context.state.slice(1);
  const edition = context.edition === null ? '' : `, edition ${context.edition}`;
  const warning =
    context.state === 'withdrawn' ? ': do not use it' : context.state === 'released' ? '' : ': not for the bench';
  const fetched = context.fetched === null ? '' : ` Card fetched ${context.fetched}.`;
  const digest = context.digest.replace(/^sha256:/, '').slice(0, 8);
  return [`${state}${edition}${warning}. Digest ${digest}.${fetched}`, context.state !== 'released'];
}
