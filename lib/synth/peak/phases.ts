import { expandGrid } from '../grid/grid';
import type { RenderOptions } from '../synthesize/types';
import type { Factor, Ink, WaveformContent } from '../types';
import { createPeakSearch, type PeakSearch } from './search';

/** Phases to try: a quadratic rule for inks of several cells a symbol, an angle for tones that stand alone. */
export interface PhaseChoice {
  /** Source: Newman, 1965, and Schroeder, IEEE Trans. IT-16, 1970 (from memory). */
  rule: 'newman' | 'schroeder';
  toneDeg: number;
}

/** What the choices reach in a content. */
export interface PhaseReach {
  /** Pilot and tone inks whose cells take the rule, with the most cells that they have in a symbol. */
  ruled: { ink: number; count: number }[];
  /** Tone inks with one cell a symbol at most. */
  single: number[];
}

const DEGREES_APART = 15;
const COUNT_MOST = 1048576;

/** Looks through the cells for the pilots and tones that are painted. `cells`: L·N inks in place of the grid. */
export function phaseReach(content: WaveformContent, cells?: Uint8Array): PhaseReach {
  const { fftSize, symbolCount, tray } = content;
  const all = cells ?? expandGrid(content.grid, fftSize);
  const most = new Int32Array(256);
  const here = new Int32Array(256);
  for (let symbol = 0; symbol < symbolCount; symbol++) {
    here.fill(0);
    for (let i = symbol * fftSize; i < (symbol + 1) * fftSize; i++) here[all[i]!]!++;
    for (let ink = 0; ink < tray.length; ink++) most[ink] = Math.max(most[ink]!, here[ink]!);
  }
  const reach: PhaseReach = { ruled: [], single: [] };
  tray.forEach(({ role }, ink) => {
    if (most[ink]! > 1 && (role === 'pilot' || role === 'tone'))
      reach.ruled.push({ ink, count: Math.min(most[ink]!, COUNT_MOST) });
    else if (most[ink] === 1 && role === 'tone') reach.single.push(ink);
  });
  return reach;
}

/** The tray with a choice's phases: the rule over the cells of each symbol, counted from its first; the angle on lone tones. */
export function trayWithPhases(tray: readonly Ink[], reach: PhaseReach, { rule, toneDeg }: PhaseChoice): Ink[] {
  return tray.map((ink, place) => {
    const ruled = reach.ruled.find((one) => one.ink === place);
    const factors: Factor[] = ruled
      ? [{ sequence: { kind: rule, count: ruled.count }, counter: 'symbolCell', start: 0 }]
      : [];
    if (ruled && ink.role === 'pilot') return { ...ink, value: { factors } };
    if (ruled && ink.role === 'tone') return { ...ink, value: { ...ink.value, factors, phaseDeg: 0 } };
    if (reach.single.includes(place) && ink.role === 'tone')
      return { ...ink, value: { ...ink.value, phaseDeg: toneDeg } };
    return ink;
  });
}

/** The choices that differ in a content: none where no pilot and no tone is painted. `rule`: only those of one. */
export function phaseChoices({ ruled, single }: PhaseReach, rule?: PhaseChoice['rule']): PhaseChoice[] {
  const both: PhaseChoice['rule'][] = ruled.length > 0 ? ['newman', 'schroeder'] : ['newman'];
  const rules = rule === undefined ? both : [rule];
  const angles = single.length > 0 ? Array.from({ length: 360 / DEGREES_APART }, (_, i) => i * DEGREES_APART) : [0];
  if (ruled.length === 0 && single.length === 0) return [];
  return rules.flatMap((law) => angles.map((toneDeg) => ({ rule: law, toneDeg })));
}

/**
 * Tries Newman's and Schroeder's phases on pilots and tones, and every 15° on tones that stand alone in their symbols.
 * `rule`: only one of the two rules.
 */
export function createPhaseSearch(
  content: WaveformContent,
  options: Pick<RenderOptions, 'cells' | 'engine'> & { rule?: PhaseChoice['rule'] } = {},
): PeakSearch<PhaseChoice> & { reach: PhaseReach } {
  const reach = phaseReach(content, options.cells);
  const contentOf = (choice: PhaseChoice): WaveformContent => ({
    ...content,
    tray: trayWithPhases(content.tray, reach, choice),
  });
  const search = createPeakSearch(content, phaseChoices(reach, options.rule), contentOf, options);
  return Object.assign(search, { reach });
}
