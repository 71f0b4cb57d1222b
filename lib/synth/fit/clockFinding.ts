import { fractionToNumber, type ExactFraction } from '../numerology';
import type { BenchContent, WaveformContent } from '../types';
import { compareFractions, decimalFraction } from './exact';
import { clockOf, ppmBetween } from './limits';
import type { Finding } from './types';
import { spell, spellHz, spellPpm } from './words';

/**
 * The sample clock N · M · Δf against range and step. A miss names the nearest clock that can be set and the error of the subcarrier spacing
 * that playing there would cause.
 */
export function clockFinding(content: WaveformContent, bench: BenchContent): Finding {
  const { exact, nearest, isAllowed } = clockOf(content, bench);
  const { least, most, step } = bench.sampleClockHz;
  const hz = fractionToNumber(exact);
  const base = { check: 'clock', title: 'Clock', measured: hz, unit: 'Hz', found: spellHz(hz), hard: true } as const;
  const plays = `The sample clock is ${spellHz(hz)}; this bench plays ${spellHz(least)} to ${spellHz(most)}.`;
  if (isAllowed) return { ...base, limit: most, distance: hz - most, verdict: 'meets', byHowMuch: '', words: plays };
  const tooSlow = compareFractions(exact, decimalFraction(least)) < 0;
  const tooFast = compareFractions(exact, decimalFraction(most)) > 0;
  const atNearest = nearest === null ? '' : ` ${nearestWords(exact, nearest)}`;
  if (tooSlow || tooFast) {
    const limit = tooSlow ? least : most;
    const off = Math.abs(hz - limit);
    return {
      ...base,
      limit,
      distance: off,
      verdict: 'misses',
      byHowMuch: off > 0 ? `${spellHz(off)} too ${tooSlow ? 'slow' : 'fast'}` : `too ${tooSlow ? 'slow' : 'fast'}`,
      words: nearest === null ? `${plays} No multiple of ${spellHz(step!)} lies between.` : plays + atNearest,
    };
  }
  if (nearest === null) {
    return {
      ...base,
      limit: null,
      distance: null,
      verdict: 'misses',
      byHowMuch: 'off the step',
      words: `Only whole multiples of ${spellHz(step!)} can be set, and none lies between ${spellHz(least)} and ${spellHz(most)}.`,
    };
  }
  const near = fractionToNumber(nearest);
  const off = Math.abs(hz - near);
  return {
    ...base,
    limit: near,
    distance: off,
    verdict: 'misses',
    byHowMuch: off > 0 ? `${spellHz(off)} off the step` : 'off the step',
    words: `The sample clock is ${spellHz(hz)}; only whole multiples of ${spellHz(step!)} can be set.${atNearest}`,
  };
}

/** Beyond this the share is said in words that a person weighs at once. */
const PPM_MOST = 10000;

function nearestWords(exact: ExactFraction, nearest: ExactFraction): string {
  const ppm = ppmBetween(exact, nearest);
  const error = Math.abs(ppm) <= PPM_MOST ? spellPpm(ppm) : `${ppm > 0 ? '+' : ''}${spell(ppm / 10000, 1)} %`;
  return `The nearest is ${spellHz(fractionToNumber(nearest))}: played there, the subcarrier spacing is off by ${error}.`;
}
