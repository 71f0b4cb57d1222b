import { demand } from '../errors';
import type { WaveformContent } from '../types';
import type { RenderOptions, SymbolSynthesis } from './types';
import { powerBefore } from './synthesis';
import { createUsefulParts, planParts } from './usefulParts';

/** Renders single symbols, in any order (upwards is fastest). Throws SynthError as frameLayout and createCellValues do. */
export function createSymbolSynthesis(content: WaveformContent, options: RenderOptions = {}): SymbolSynthesis {
  const plan = planParts(content, options, powerBefore(content, options));
  const { layout, values } = plan;
  const parts = createUsefulParts(plan, options, 0);
  return {
    layout,
    values,
    useful(repeat, symbol, out) {
      demand(out.length >= 2 * layout.usefulSamples, 'buffer_too_small', 'A useful part has 2·N·M numbers.');
      parts.enter();
      out.set(parts.part(repeat, symbol, -1));
    },
  };
}
