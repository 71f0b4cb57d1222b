import type { WaveformContent } from '../types';
import { loopClosing, payloadClosing, toneJumps } from './closing';
import type { FitFacts } from './facts';
import { REPEATS_MOST } from './limits';
import { seamJumpDb } from './seamJump';
import type { Finding, SeamMeasure } from './types';
import { counted, spell } from './words';

/** The wrap of a loop: the frequency offset and the tones that run on must come back to where they began. */
export function seamFinding(content: WaveformContent, facts: FitFacts, seam: SeamMeasure | null): Finding {
  const closing = loopClosing(content);
  const base = { check: 'seam', title: 'Seam', unit: 'turns', hard: false } as const;
  if (!closing.applies) {
    return {
      ...base,
      measured: null,
      limit: null,
      distance: 0,
      verdict: 'meets',
      byHowMuch: '',
      found: 'no wrap in a burst',
      words: 'A burst has no wrap.',
    };
  }
  const steps =
    seam === null ? '' : `${spell(seam.stepAtWrap, 2)} of the RMS, elsewhere ${spell(seam.stepElsewhere, 2)}`;
  const measured =
    seam === null
      ? ''
      : ` The step there is ${spell(seam.stepAtWrap, 2)} of the RMS, elsewhere ${spell(seam.stepElsewhere, 2)} at most.`;
  const tones = toneJumps(content, facts.toneBorders(content)).atWrap;
  const hasOffset = content.frequencyOffsetHz !== 0;
  const isOpen = hasOffset && !closing.closes;
  if (!isOpen && tones.length === 0) {
    const turns = spell(Math.round(closing.turns));
    const found = hasOffset ? `closes, ${turns} turns` : 'closes';
    const runsOn = hasOffset
      ? `The frequency offset makes ${turns} whole turns over the file.`
      : 'The last sample runs on into the first.';
    return {
      ...base,
      title: seam === null ? base.title : 'Seam, step at the wrap',
      measured: closing.turns,
      limit: Math.round(closing.turns) + 0,
      distance: 0,
      verdict: 'meets',
      byHowMuch: '',
      found: steps === '' ? found : steps,
      words: runsOn + measured,
    };
  }
  const jumpDb = seamJumpDb(content, isOpen ? closing.residualTurns : 0, tones);
  const size =
    jumpDb === null ? '' : `, a step ${spell(Math.abs(jumpDb), 1)} dB ${jumpDb < 0 ? 'below' : 'above'} the mean power`;
  const worst = tones.reduce((most, tone) => (Math.abs(tone.turns) > Math.abs(most) ? tone.turns : most), 0);
  const toneWords =
    tones.length === 0
      ? ''
      : ` ${counted(tones.length, 'tone that runs on', 'tones that run on')} ${tones.length === 1 ? 'jumps' : 'jump'} there by ${tones.length === 1 ? '' : 'up to '}${spell(Math.abs(worst), 3)} of a turn${isOpen ? '' : size}.`;
  const residual = Math.abs(closing.residualTurns);
  const turns = spell(closing.turns, Math.abs(closing.turns) < 1000 ? 3 : 1);
  const offsetWords = isOpen
    ? `The frequency offset makes ${turns} turns over the file: its phase jumps at the wrap by ${spellTurns(residual)} of a turn${size}.`
    : '';
  return {
    ...base,
    measured: isOpen ? closing.turns : Math.abs(worst),
    limit: isOpen ? Math.round(closing.turns) + 0 : 0,
    distance: isOpen ? residual : Math.abs(worst),
    verdict: 'misses',
    byHowMuch: isOpen
      ? `${spellTurns(residual)} of a turn open`
      : `${counted(tones.length, 'tone')} ${tones.length === 1 ? 'jumps' : 'jump'}`,
    found: 'does not close',
    words: (offsetWords + toneWords).trim() + measured,
  };
}

/** Never "0.000 of a turn": what is open is open. */
function spellTurns(turns: number): string {
  return turns < 0.0005 ? 'less than 0.001' : spell(turns, 3);
}

/** Tones whose phase jumps where a prefix begins; the wrap is the seam's. */
export function toneFinding(content: WaveformContent, facts: FitFacts): Finding {
  const jumps = toneJumps(content, facts.toneBorders(content)).betweenSymbols;
  const base = { check: 'toneJump', title: 'Tones', unit: 'turns', limit: 0, hard: false } as const;
  const [first] = jumps;
  if (first === undefined) {
    const isPainted = content.tray.some((ink, id) => ink.role === 'tone' && facts.cellsOfInk(content)[id]! > 0);
    return {
      ...base,
      measured: 0,
      distance: 0,
      verdict: 'meets',
      byHowMuch: '',
      found: isPainted ? 'run on' : 'none',
      words: isPainted ? 'No tone jumps at a prefix.' : 'No tones are used.',
    };
  }
  const worst = jumps.reduce((most, jump) => (Math.abs(jump.turns) > Math.abs(most.turns) ? jump : most), first);
  const size = Math.abs(worst.turns);
  const others = jumps.length > 1 ? ` ${counted(jumps.length, 'tone')} jump.` : '';
  return {
    ...base,
    measured: size,
    distance: size,
    verdict: 'misses',
    byHowMuch: `jumps by ${spellTurns(size)} of a turn`,
    found: `${counted(jumps.length, 'tone')} jump${jumps.length === 1 ? 's' : ''}`,
    words: `“${worst.inkName}” on subcarrier ${spell(worst.subcarrier)} jumps by ${spellTurns(size)} of a turn where a prefix begins.${others}`,
  };
}

/** No bench limits this: it is said, with what would close it, and refuses nothing. */
export function payloadFinding(content: WaveformContent, facts: FitFacts): Finding {
  const streams = payloadClosing(content, { cellsOfInk: facts.cellsOfInk(content), periodOf: facts.periodOf });
  const open = streams.filter((stream) => stream.closes !== true);
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
      found: isOnce ? 'played once' : streams.length === 0 ? 'none' : 'closes',
      words: isOnce
        ? 'A burst plays its payload once.'
        : streams.length === 0
          ? 'No payload is used.'
          : 'The payload runs on where the file starts again.',
    };
  }
  const unknown = open.find((stream) => stream.repeatsToClose === null);
  if (unknown) {
    return {
      ...base,
      measured: content.timing.repeats,
      limit: null,
      verdict: 'cannotJudge',
      byHowMuch: '',
      found: 'not known',
      words: `The period of “${unknown.name}” is not known, so where it closes cannot be told.`,
    };
  }
  const others = open.length > 1 ? ` ${counted(open.length, 'stream')} break.` : '';
  return {
    ...base,
    measured: content.timing.repeats,
    limit: first.repeatsToClose,
    verdict: 'meets',
    byHowMuch: '',
    found:
      first.repeatsToClose! > REPEATS_MOST
        ? 'breaks at the wrap'
        : `breaks, closes after ${spell(first.repeatsToClose!)}`,
    words: `“${first.name}” breaks where it starts again: ${spell(first.bitsPerRepeat)} bits a repeat of a sequence of ${spell(first.periodBits!)}. Continued, it closes after ${counted(first.repeatsToClose!, 'repeat')}.${others}`,
  };
}
