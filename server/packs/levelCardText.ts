import type { Caution, LevelCard } from '@/lib/synth';

export interface CardHead {
  baseName: string;
  stateWords: string;
  title: string;
  benchName: string;
  vectorSha256: string;
  saturatedWords: string | null;
  /** What the fit says of limits that are missed and may be meant. */
  notices: string[];
}

const minus = (text: string) => text.replace('-', '−');
const dbm = (value: number | null, none: string, digits = 2) =>
  value === null ? none : `${minus(value.toFixed(digits))} dBm`;
const dbfs = (value: number | null) => (value === null ? 'none' : `${minus(value.toFixed(2))} dBFS`);

function readingLines(card: LevelCard): string[] {
  if (card.readings.length < 2) return [];
  return [
    "The profile does not say what the generator's setting means. The highest level counts:",
    ...card.readings.map(
      (reading) =>
        `  as ${reading.words}: peak ${dbm(reading.peakNowDbm, 'unknown')}, mean ${dbm(reading.meanNowDbm, 'unknown')}, highest setting ${dbm(reading.highestSettingDbm, 'none', 1)}`,
    ),
  ];
}

/** level-card.txt: what to set, what not to exceed, and the eleven points in the order in which they are read and obeyed. */
export function levelCardText(head: CardHead, card: LevelCard, cautions: Caution[]): string {
  const lines = [
    'LEVEL CARD',
    `${head.title}`,
    `${head.baseName}`,
    head.stateWords,
    `Bench profile: ${head.benchName}`,
    `SHA-256 of the vector: ${head.vectorSha256}`,
    '',
    `Set on the generator   ${dbm(card.settingDbm, 'not given')}: ${card.settingWords}`,
    `Highest setting        ${dbm(card.highestSettingDbm, 'none: no limit given', 1)}${card.highestSettingDbm === null ? '' : `, ${card.levelToleranceDb} dB kept for error`}`,
    '',
    "At the device's connector, after attenuator and cable:",
    `  Peak now             ${dbm(card.peakNowDbm, 'unknown')}`,
    `  Peak limit           ${dbm(card.peakLimitDbm, 'no limit given')}`,
    `  Mean                 ${dbm(card.meanNowDbm, 'unknown')}`,
    `  Mean limit           ${dbm(card.meanLimitDbm, 'no limit given')}`,
    `  ${card.sentence}`,
    ...readingLines(card),
    '',
    `Loss before it         ${card.lossDb} dB`,
    `Without it the peak is ${dbm(card.peakWithoutAttenuatorDbm, 'unknown')}`,
    `Sample clock           ${card.sampleClockHz} Hz`,
    `Peak in the file       ${dbfs(card.peakDbfs)}`,
    `Mean while it plays    ${dbfs(card.activeRmsDbfs)}`,
    `Mean over the file     ${dbfs(card.fileRmsDbfs)}`,
    ...(head.saturatedWords === null ? [] : [`Saturated              ${head.saturatedWords}`]),
    ...(head.notices.length === 0 ? [] : ['', 'The fit says:', ...head.notices.map((notice) => `  ${notice}`)]),
    '',
    ...cautions.map((caution) => `${String(caution.number).padStart(2)}. ${caution.text}`),
  ];
  return `${lines.join('\n')}\n`;
}
