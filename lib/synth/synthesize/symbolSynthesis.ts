import { demand } from '../errors';
import { createTransform } from '../fft/transform';
import type { WaveformContent } from '../types';
import { createPlacedValues, type Placement } from './cellValues';
import { frameLayout } from './layout';
import type { RenderOptions, SymbolSynthesis } from './types';

/**
 * Renders single symbols, in any order (upwards is fastest). Throws SynthError as frameLayout and createCellValues do.
 * The inverse transform is a forward one with the bins turned round (bin −k), which saves a pass over the samples.
 */
export function createSymbolSynthesis(content: WaveformContent, options: RenderOptions = {}): SymbolSynthesis {
  const layout = frameLayout(content, options.oversampling);
  const { fftSize } = content;
  const size = layout.usefulSamples;
  const half = Math.floor(fftSize / 2);
  const values = createPlacedValues(content, options.cells, 1 / Math.sqrt(fftSize));
  const transform = createTransform(size);
  const spectrum = new Float64Array(2 * size);
  // k ≤ 0 at bin −k, k > 0 at bin size − k
  const placement: Placement = { split: half + 1, low: half, high: size + half, stride: -1 };
  return {
    layout,
    values,
    useful(repeat, symbol, out) {
      demand(out.length >= 2 * size, 'buffer_too_small', 'A useful part has 2·N·M numbers.');
      spectrum.fill(0, 0, 2 * (half + 1));
      spectrum.fill(0, 2 * (size - fftSize + half + 1));
      values.writePlaced(repeat, symbol, spectrum, placement);
      transform.forward(spectrum, out);
    },
  };
}
