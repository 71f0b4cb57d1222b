import { countedTooLow, paintLimits } from '@/lib/document/counterRules';
import type { PaintLimits } from '@/lib/document/counterRules';
import type { Ink } from '@/lib/synth/index';
import type { EditorDocument } from './document';
import type { Span } from './types';

/** The refusal's sentence with the ink's name and the first place that it can hold. */
function refusal(ink: Ink, limits: PaintLimits, at: { position: number; symbol: number }, of: RuleScope): string {
  const { fftSize, symbolCount } = of.settings;
  const factors = ink.role === 'pilot' || ink.role === 'tone' ? ink.value.factors : [];
  const broken = factors.findIndex(({ counter, start }) => {
    if (start >= 0) return false;
    if (counter === 'subcarrier') return at.position < limits.leastPosition;
    if (counter === 'symbol') return at.symbol < limits.leastSymbol;
    return true;
  });
  const sentence = countedTooLow(ink, Math.max(broken, 0), fftSize, symbolCount);
  return `${sentence.replace(/-(?=\d)/g, '\u2212')}.`;
}

type RuleScope = Pick<EditorDocument, 'settings'>;

/** Why spans cannot hold an ink (its name and the first place it can hold); null when they can. */
export function indexRefusal(document: RuleScope, spans: readonly Span[], ink: number): string | null {
  const painted = document.settings.tray[ink];
  if (!painted) return null;
  const limits = paintLimits(painted);
  const wrong = spans.find(({ from, symbol }) => from < limits.leastPosition || symbol < limits.leastSymbol);
  return wrong ? refusal(painted, limits, { position: wrong.from, symbol: wrong.symbol }, document) : null;
}

/** The same question for a whole grid, after a change of an ink or of the size; null when every painted cell may stand. */
export function gridRefusal(document: RuleScope & Pick<EditorDocument, 'cells'>): string | null {
  const { settings, cells } = document;
  const limits = settings.tray.map(paintLimits);
  if (limits.every(({ leastPosition, leastSymbol }) => leastPosition === 0 && leastSymbol === 0)) return null;
  for (let symbol = 0, at = 0; symbol < settings.symbolCount; symbol++) {
    for (let position = 0; position < settings.fftSize; position++, at++) {
      const ink = cells[at]!;
      const limit = limits[ink];
      if (limit && (position < limit.leastPosition || symbol < limit.leastSymbol))
        return refusal(settings.tray[ink]!, limit, { position, symbol }, document);
    }
  }
  return null;
}
