import { fileSamples, fractionToNumber, sampleClock } from '../../numerology';
import { applyChanges } from '../changes';
import { decimalFraction, divideFractions, multiplyFractions } from '../exact';
import { clockOf, isClockAllowed, isLoadable, OVERSAMPLING_MOST, ppmBetween } from '../limits';
import { counted, spell, spellHz, spellPpm } from '../words';
import { change, lengthWords, type Alternatives, type Case, type Draft } from './draft';
import { fftSizeDrafts } from './fftSizeRemedies';
import { atOtherRate, padWords } from './otherRate';

/** A spacing further away than this is another waveform, not a remedy. */
const SPACING_PPM_MOST = 10000;

/** M keeps the spacing exactly and the grid as it is; the spacing keeps the file and moves every frequency; N lays the grid out anew. */
export function clockRemedies(about: Case): Alternatives[] {
  return [oversamplingDrafts(about, 'clock'), spacingDrafts(about), fftSizeDrafts(about)];
}

/** Other oversampling factors, the nearest first; marks keep their times, the pad its time, or fills up to a length that loads. */
export function* oversamplingDrafts(about: Case, purpose: 'clock' | 'length' | 'shorter'): Alternatives {
  const { document, bench } = about;
  const { oversampling } = document.content;
  const factors = Array.from({ length: OVERSAMPLING_MOST }, (_, i) => i + 1)
    .filter((factor) => factor !== oversampling && (purpose !== 'shorter' || factor < oversampling))
    .sort((a, b) => Math.abs(a - oversampling) - Math.abs(b - oversampling) || a - b);
  for (const factor of factors) {
    const clock = sampleClock({ ...document.content, oversampling: factor });
    // where the clock misses anyway, it may go on missing for another limit's sake
    const wasAllowed = purpose !== 'clock' && !clockOf(document.content, bench.content).isAllowed;
    if (!wasAllowed && !isClockAllowed(clock, bench.content.sampleClockHz)) continue;
    for (const changes of atOtherRate(
      about,
      [change(document, '/content/oversampling', factor)],
      [oversampling, factor],
    )) {
      const length = fileSamples(applyChanges(document, changes).content);
      const filled = padWords(document, changes, oversampling, factor);
      // a length mended by the pad alone is the pad's remedy
      if (purpose === 'length' && (filled !== '' || !isLoadable(length, bench.content))) continue;
      yield {
        kind: 'oversampling',
        label: `Oversample ${counted(factor, 'time')}: ${purpose === 'clock' ? spellHz(fractionToNumber(clock)) : spell(length)}`,
        changes,
        effect: lengthWords(document, length) + filled,
      };
    }
  }
}

/** The spacing that makes the nearest clock, exactly: every frequency moves by the same share, the file keeps its samples. */
function* spacingDrafts({ document, bench }: Case): Alternatives {
  const { content } = document;
  const { exact, nearest } = clockOf(content, bench.content);
  if (nearest === null) return;
  const ppm = ppmBetween(exact, nearest);
  if (ppm === 0 || Math.abs(ppm) > SPACING_PPM_MOST) return;
  const spacing = divideFractions(nearest, {
    numerator: BigInt(content.fftSize) * BigInt(content.oversampling),
    denominator: 1n,
  });
  const most = BigInt(Number.MAX_SAFE_INTEGER);
  if (spacing.numerator > most || spacing.denominator > most || spacing.numerator > 1000000000n * spacing.denominator)
    return;
  const after: [number, number] = [Number(spacing.numerator), Number(spacing.denominator)];
  const changes = [change(document, '/content/subcarrierSpacingHz', after)];
  const draft: Draft = {
    kind: 'spacing',
    label: `Move the spacing by ${spellPpm(ppm)}: ${spellHz(fractionToNumber(nearest))}`,
    changes,
    effect: `The spacing becomes ${spellHz(fractionToNumber(spacing))}; every subcarrier moves with it, and all times by as much.`,
  };
  yield draft;
  if (content.frequencyOffsetHz === 0) return;
  // an offset that closed the loop closes it again where it moves with the clock
  const offset = multiplyFractions(decimalFraction(content.frequencyOffsetHz), divideFractions(nearest, exact));
  yield {
    ...draft,
    changes: [...changes, change(document, '/content/frequencyOffsetHz', fractionToNumber(offset))],
    effect: `${draft.effect} The frequency offset moves with it.`,
  };
}

/** Whether a clock remedy turns M, N or the spacing: the sentence that a clock finding ends with. */
export function clockAdvice(kinds: readonly string[]): string {
  const names: Record<string, string> = {
    oversampling: 'M (oversampling)',
    spacing: 'the spacing',
    fftSize: 'N (FFT size)',
  };
  const found = kinds.flatMap((kind) => names[kind] ?? []);
  if (found.length === 0) return 'Neither M, N nor a spacing within 1 % gives this waveform a clock that can be set.';
  const list = found.length === 1 ? found[0]! : `${found.slice(0, -1).join(', ')} or ${found.at(-1)!}`;
  return `Change ${list}.`;
}
