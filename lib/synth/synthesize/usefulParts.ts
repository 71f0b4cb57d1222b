import { isEngineSize } from '../engine/transformPlan';
import { createMixedRadix } from '../fft/mixedRadix';
import { createReducedValues } from '../peak/reducedValues';
import { createSymbolReducer } from '../peak/symbolReducer';
import type { WaveformContent } from '../types';
import { createPlacedValues, type Placement } from './cellValues';
import { createEngineParts } from './engineParts';
import { frameLayout } from './layout';
import type { PartPlan, UsefulParts } from './partTypes';
import type { RenderOptions } from './types';

/**
 * Plans the parts; `meanPower` is asked where the content's peak is reduced, before parts are made.
 * Throws SynthError as frameLayout and createCellValues do.
 */
export function planParts(content: WaveformContent, options: RenderOptions, meanPower: () => number): PartPlan {
  const layout = frameLayout(content, options.oversampling);
  const { fftSize } = content;
  const meant = createPlacedValues(content, options.cells, 1 / Math.sqrt(fftSize));
  const reducer = createSymbolReducer(content);
  const values = reducer ? createReducedValues(meant, reducer, meanPower) : meant;
  const half = Math.floor(fftSize / 2);
  // k < 0 at bin size + k, k ≥ 0 at bin k
  const placement: Placement = { split: half, low: layout.usefulSamples - half, high: -half };
  const { first, end } = values.painted;
  const isReduced = reducer !== null;
  return {
    values,
    layout,
    placement,
    low: Math.max(0, end - half),
    high: Math.max(0, half - first),
    // what is asked may itself use the engine, which must not happen while a part lies in it
    prepare: isReduced ? () => void meanPower() : null,
  };
}

/** Parts by the engine where there is one that knows the size, else by the same operations here. */
export function createUsefulParts(plan: PartPlan, options: RenderOptions, slots: number): UsefulParts {
  const { engine } = options;
  const isKnown = engine !== undefined && isEngineSize(plan.layout.usefulSamples);
  const parts = isKnown ? createEngineParts(plan, engine, slots) : createPlainParts(plan, slots);
  const { prepare } = plan;
  if (prepare === null) return parts;
  return {
    ...parts,
    enter() {
      prepare();
      return parts.enter();
    },
  };
}

function createPlainParts({ values, layout, placement, low, high }: PartPlan, slots: number): UsefulParts {
  const size = layout.usefulSamples;
  const inverse = createMixedRadix(size, 'inverse');
  const spectrum = new Float64Array(2 * size);
  const kept: (Float64Array | undefined)[] = [];
  let scratch: Float64Array | null = null;
  return {
    onSamples: null,
    enter: () => true,
    rest: () => undefined,
    part(repeat, symbol, slot) {
      const known = kept[slot];
      if (known !== undefined) return known;
      const isKeeping = slot >= 0 && slot < slots;
      const part = isKeeping ? new Float64Array(2 * size) : (scratch ??= new Float64Array(2 * size));
      spectrum.fill(0, 0, 2 * low);
      spectrum.fill(0, 2 * (size - high));
      values.writePlaced(repeat, symbol, spectrum, placement);
      inverse(spectrum, part);
      if (isKeeping) kept[slot] = part;
      return part;
    },
  };
}
