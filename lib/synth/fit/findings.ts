import { countedPeakDbfs } from '../level/levels';
import { levelCard } from '../level/levelCard';
import type { BenchProfile, WaveformContent, WaveformDocument } from '../types';
import { fileSamples, fractionToNumber, sampleClock } from '../numerology';
import { loopClosing, payloadClosing, toneJumps } from './closing';
import { compareFractions, decimalFraction, divideFractions, multiplyFractions, nearestWhole } from './exact';
import { markers } from './markerFinding';
import type { Finding, FitFinding, MeasuredLevels } from './types';
import { counted, spell, spellHz } from './words';

type Bench = BenchProfile['content'];

const NO_LEVELS: MeasuredLevels = {
  fileRmsDbfs: null,
  activeRmsDbfs: null,
  renderedPeakDbfs: null,
  reconstructedPeakDbfs: null,
  saturatedComponents: null,
};

/** dB below which two levels count as equal: an analysis in doubles is good to about 1e-12. */
const LEVEL_SLACK_DB = 1e-9;

/** Every limit of the bench and the loop's own, in the order in which they are shown. No remedies yet. */
export function judge(document: WaveformDocument, bench: BenchProfile, measured: MeasuredLevels | null): Finding[] {
  const { content } = document;
  const limits = bench.content;
  const levels = measured ?? NO_LEVELS;
  return [
    clock(content, limits),
    granularity(content, limits),
    leastLength(content, limits),
    memory(content, limits),
    mode(content, limits),
    word(content, limits, levels),
    markers(content, limits),
    seam(content),
    tones(content),
    payload(content),
    headroom(limits, levels),
    level(document, bench, levels),
  ];
}

/** A finding about a file's length or its like: `distance` > 0 misses. */
function byDistance(
  of: Pick<FitFinding, 'check' | 'title' | 'hard' | 'unit' | 'found' | 'words'> & {
    measured: number;
    limit: number;
    distance: number;
    byHowMuch: string;
  },
): Finding {
  const misses = of.distance > 0;
  return { ...of, verdict: misses ? 'misses' : 'meets', byHowMuch: misses ? of.byHowMuch : '' };
}

function clock(content: WaveformContent, limits: Bench): Finding {
  const exact = sampleClock(content);
  const hz = fractionToNumber(exact);
  const { least, most, step } = limits.sampleClockHz;
  const base = { check: 'clock', title: 'Clock', measured: hz, unit: 'Hz', found: spellHz(hz), hard: true } as const;
  const range = `${spellHz(least)} to ${spellHz(most)}`;
  if (compareFractions(exact, decimalFraction(least)) < 0) {
    return {
      ...base,
      limit: least,
      distance: least - hz,
      verdict: 'misses',
      byHowMuch: `${spellHz(least - hz)} too slow`,
      words: `The sample clock is ${spellHz(hz)}; this bench plays ${range}.`,
    };
  }
  if (compareFractions(exact, decimalFraction(most)) > 0) {
    return {
      ...base,
      limit: most,
      distance: hz - most,
      verdict: 'misses',
      byHowMuch: `${spellHz(hz - most)} too fast`,
      words: `The sample clock is ${spellHz(hz)}; this bench plays ${range}.`,
    };
  }
  if (step !== null) {
    const size = decimalFraction(step);
    const steps = divideFractions(exact, size);
    if (steps.denominator !== 1n) {
      const near = fractionToNumber(multiplyFractions(size, { numerator: nearestWhole(steps), denominator: 1n }));
      const off = Math.abs(hz - near);
      return {
        ...base,
        limit: near,
        distance: off,
        verdict: 'misses',
        byHowMuch: off > 0 ? `${spellHz(off)} off the step` : 'off the step',
        words: `Only whole multiples of ${spellHz(step)} can be set; the nearest is ${spellHz(near)}.`,
      };
    }
  }
  return {
    ...base,
    limit: most,
    distance: hz - most,
    verdict: 'meets',
    byHowMuch: '',
    words: `The sample clock is ${spellHz(hz)}; this bench plays ${range}.`,
  };
}

function granularity(content: WaveformContent, limits: Bench): Finding {
  const samples = fileSamples(content);
  const size = limits.granularitySamples;
  const short = (size - (samples % size)) % size;
  const multiple = samples / size;
  return byDistance({
    check: 'granularity',
    title: 'Length',
    unit: 'samples',
    hard: true,
    measured: samples,
    limit: size,
    distance: short,
    byHowMuch: `${counted(short, 'sample')} short`,
    found: size === 1 ? spell(samples) : `${spell(multiple, Number.isInteger(multiple) ? 0 : 2)} × ${spell(size)}`,
    words:
      short === 0
        ? `${counted(samples, 'sample')}, a whole multiple of ${spell(size)}.`
        : `${counted(samples, 'sample')} are ${spell(multiple, Number.isInteger(multiple * 10) ? 1 : 2)} × the granularity of ${spell(size)}. Only whole multiples load.`,
  });
}

function leastLength(content: WaveformContent, limits: Bench): Finding {
  const samples = fileSamples(content);
  const least = limits.leastSamples;
  return byDistance({
    check: 'leastLength',
    title: 'Shortest length',
    unit: 'samples',
    hard: true,
    measured: samples,
    limit: least,
    distance: least - samples,
    byHowMuch: `${counted(least - samples, 'sample')} short`,
    found: `${spell(samples)}, needs ${spell(least)}`,
    words: `${counted(samples, 'sample')}; the shortest that loads has ${spell(least)}.`,
  });
}

function memory(content: WaveformContent, limits: Bench): Finding {
  const samples = fileSamples(content);
  const most = limits.mostSamples;
  return byDistance({
    check: 'memory',
    title: 'Memory',
    unit: 'samples',
    hard: true,
    measured: samples,
    limit: most,
    distance: samples - most,
    byHowMuch: `${counted(samples - most, 'sample')} too many`,
    found: `${spell(samples)} of ${spell(most)}`,
    words: `${counted(samples, 'sample')}; the memory holds ${spell(most)}.`,
  });
}

function mode(content: WaveformContent, limits: Bench): Finding {
  const plays = limits.modes.includes(content.timing.mode);
  return {
    check: 'mode',
    title: 'Mode',
    unit: null,
    measured: null,
    limit: null,
    distance: null,
    hard: true,
    verdict: plays ? 'meets' : 'misses',
    byHowMuch: plays ? '' : `no ${content.timing.mode}`,
    found: content.timing.mode,
    words: `The waveform is a ${content.timing.mode}; this bench plays ${limits.modes.join(' and ')}.`,
  };
}

function word(content: WaveformContent, limits: Bench, levels: MeasuredLevels): Finding {
  const order =
    limits.word === 'int8' ? 'one byte' : limits.byteOrder === 'little' ? 'low byte first' : 'high byte first';
  const found = limits.word === 'float32' ? `32 bit float, ${order}` : `${limits.bits} bit, ${order}`;
  const saturated = levels.saturatedComponents;
  const base = { check: 'word', title: 'Word', unit: 'components', limit: 0, measured: saturated, found } as const;
  if (saturated === null || saturated === 0) {
    return {
      ...base,
      distance: saturated,
      hard: true,
      verdict: 'meets',
      byHowMuch: '',
      words: saturated === null ? `${found}. What saturates has not been counted yet.` : `${found}; nothing saturates.`,
    };
  }
  // an RMS reference may put peaks beyond full scale on purpose: counted and said, not refused
  const isMeant = content.level.reference === 'rms';
  const beyond = limits.word === 'float32' ? 'stand beyond ±1' : 'are held at full scale';
  return {
    ...base,
    distance: saturated,
    hard: true,
    verdict: isMeant ? 'meets' : 'misses',
    byHowMuch: isMeant ? '' : `${counted(saturated, 'component')} too large`,
    words: isMeant
      ? `${found}. ${counted(saturated, 'component')} ${beyond}, as the RMS reference allows.`
      : `${found}. ${counted(saturated, 'component')} ${beyond}.`,
  };
}

function seam(content: WaveformContent): Finding {
  const closing = loopClosing(content);
  const base = { check: 'seam', title: 'Seam', unit: 'turns', limit: 0, hard: false } as const;
  if (!closing.applies || content.frequencyOffsetHz === 0) {
    return {
      ...base,
      measured: 0,
      distance: 0,
      verdict: 'meets',
      byHowMuch: '',
      found: closing.applies ? 'closes' : 'no wrap in a burst',
      words: closing.applies ? 'The last sample runs on into the first.' : 'A burst has no wrap.',
    };
  }
  const turns = spell(closing.turns, Math.abs(closing.turns) < 1000 ? 3 : 1);
  return {
    ...base,
    measured: closing.turns,
    distance: closing.closes ? 0 : Math.abs(closing.residualTurns),
    verdict: closing.closes ? 'meets' : 'misses',
    byHowMuch: closing.closes ? '' : `${spell(Math.abs(closing.residualTurns), 3)} of a turn open`,
    found: closing.closes ? `closes, ${spell(Math.round(closing.turns))} turns` : 'does not close',
    words: closing.closes
      ? `The frequency offset makes ${spell(Math.round(closing.turns))} whole turns over the file.`
      : `The frequency offset makes ${turns} turns over the file: its phase jumps at the wrap.`,
  };
}

function tones(content: WaveformContent): Finding {
  const jumps = toneJumps(content);
  const base = { check: 'toneJump', title: 'Tones', unit: 'turns', limit: 0, hard: false } as const;
  if (!jumps.worst) {
    const isPainted = content.tray.some((ink) => ink.role === 'tone');
    return {
      ...base,
      measured: 0,
      distance: 0,
      verdict: 'meets',
      byHowMuch: '',
      found: isPainted ? 'run on' : 'none',
      words: isPainted ? 'No tone jumps.' : 'No tones are used.',
    };
  }
  const { worst } = jumps;
  const size = Math.abs(worst.turns);
  const where = worst.at === 'symbols' ? 'at each border between symbols' : "at the loop's wrap";
  const others = jumps.count > 1 ? ` ${counted(jumps.count, 'tone')} jump.` : '';
  return {
    ...base,
    measured: size,
    distance: size,
    verdict: 'misses',
    byHowMuch: `jumps by ${spell(size, 3)} of a turn`,
    found: `${counted(jumps.count, 'tone')} jump${jumps.count === 1 ? 's' : ''}`,
    words: `“${worst.inkName}” on subcarrier ${spell(worst.subcarrier)} jumps by ${spell(size, 3)} of a turn ${where}.${others}`,
  };
}

/** No bench limits this: it is said, with what would close it, and refuses nothing. */
function payload(content: WaveformContent): Finding {
  const open = payloadClosing(content).filter((stream) => stream.closes !== true);
  const base = { check: 'payloadWrap', title: 'Payload', unit: 'repeats', hard: false, distance: null } as const;
  const isOnce = content.timing.mode === 'burst' && content.timing.repeats === 1;
  const first = open[0];
  if (!first || isOnce) {
    return {
      ...base,
      measured: content.timing.repeats,
      limit: null,
      verdict: 'meets',
      byHowMuch: '',
      found: isOnce ? 'played once' : 'closes',
      words: isOnce ? 'A burst plays its payload once.' : 'The payload runs on where the file starts again.',
    };
  }
  if (first.repeatsToClose === null) {
    return {
      ...base,
      measured: content.timing.repeats,
      limit: null,
      verdict: 'cannotJudge',
      byHowMuch: '',
      found: 'not known',
      words: `The period of “${first.name}” is not known, so where it closes cannot be told.`,
    };
  }
  return {
    ...base,
    measured: content.timing.repeats,
    limit: first.repeatsToClose,
    verdict: 'meets',
    byHowMuch: '',
    found: 'breaks at the wrap',
    words: `“${first.name}” breaks where it starts again; continued, it closes after ${counted(first.repeatsToClose, 'repeat')}.`,
  };
}

function headroom(limits: Bench, levels: MeasuredLevels): Finding {
  const peak = countedPeakDbfs(levels);
  const base = {
    check: 'headroom',
    title: 'Headroom',
    unit: 'dB',
    limit: limits.leastHeadroomDb,
    hard: false,
  } as const;
  if (peak === null) {
    return {
      ...base,
      measured: null,
      distance: null,
      verdict: 'cannotJudge',
      byHowMuch: '',
      found: 'not measured',
      words: 'The peak has not been measured yet.',
    };
  }
  const left = -peak;
  const lack = limits.leastHeadroomDb - left;
  const misses = lack > LEVEL_SLACK_DB;
  const which = levels.reconstructedPeakDbfs === peak ? 'The reconstructed peak' : 'Between samples the peak';
  const wanted =
    limits.leastHeadroomDb === 0
      ? 'full scale is the limit'
      : `this bench wants ${spell(limits.leastHeadroomDb, 2)} dB left`;
  return {
    ...base,
    measured: left,
    distance: misses ? lack : Math.min(0, lack),
    verdict: misses ? 'misses' : 'meets',
    byHowMuch: misses ? (lack < 0.005 ? 'less than 0.01 dB too high' : `${spell(lack, 2)} dB too high`) : '',
    found: `${spell(left, 2)} dB, needs ${spell(limits.leastHeadroomDb, 2)}`,
    words:
      left < 0
        ? `${which} stands ${spell(-left, 2)} dB above full scale; ${wanted}.`
        : `${which} stands ${spell(left, 2)} dB below full scale; ${wanted}.`,
  };
}

function level(document: WaveformDocument, bench: BenchProfile, levels: MeasuredLevels): Finding {
  const card = levelCard(document, bench, levels);
  const isMean = card.meanLeftDb !== null && (card.peakLeftDb === null || card.meanLeftDb < card.peakLeftDb);
  const left = isMean ? card.meanLeftDb : card.peakLeftDb;
  const limit = isMean ? card.meanLimitDbm : card.peakLimitDbm;
  const over = left !== null && left < -LEVEL_SLACK_DB;
  const short = over && -left < 0.005 ? 'less than 0.01 dB over' : `${spell(-(left ?? 0), 2)} dB over`;
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
    words: card.sentence,
  };
}
