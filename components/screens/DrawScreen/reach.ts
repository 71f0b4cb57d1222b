import { formatQuantity } from '@/lib/drawing/quantities';
import { combSpans } from '@/lib/editor/kernels/comb';
import { contentHead } from './contentHead';
import { paintRow } from '@/lib/editor/paint';
import type { EditorDocument } from '@/lib/editor/document';
import type { CombSettings } from '@/lib/editor/types';
import { pilotReach } from '@/lib/synth';

/** Above so many cells the reach is left to the worker's figures: a blank must answer at once. */
const CELLS_MOST = 2 ** 20;

/** The reach that the pilots would have with this comb painted: "follows 5.56 µs and 2.33 kHz". Null where there is none to tell. */
export function reachOfComb(document: EditorDocument, comb: CombSettings, ink: number): string | null {
  const { settings, cells } = document;
  if (settings.tray[ink]?.role !== 'pilot' || cells.length > CELLS_MOST) return null;
  const painted = cells.slice();
  for (const span of combSpans(comb, settings)) {
    const start = span.symbol * settings.fftSize;
    paintRow(painted.subarray(start, start + settings.fftSize), [span], ink);
  }
  const [pair] = pilotReach(contentHead(settings), painted).pairs;
  if (!pair) return null;
  const delay = pair.delayWindowSec === null ? null : formatQuantity(pair.delayWindowSec, 's', 3);
  const doppler = pair.dopplerHz === null ? null : formatQuantity(pair.dopplerHz, 'Hz', 3);
  if (!delay && !doppler) return null;
  const parts = [
    delay && `${delay.value} ${delay.unit} of delay`,
    doppler && `${doppler.value} ${doppler.unit} of Doppler`,
  ];
  return `Follows ${parts.filter(Boolean).join(', ')}`;
}
