import { sineCosine } from '../math/turns';
import { log10 } from '../math/exponential';
import { createCellValues } from '../synthesize/cellValues';
import type { WaveformContent } from '../types';
import type { ToneJump } from './closing';

/**
 * How large the wrap's step is that the frequency offset and the continuous tones predict, in dB to the mean power of the first symbol:
 * a cell of value a whose phase jumps by t turns steps by |a|·|1 − e^{j2πt}|, so its power by |a|²·(2 − 2 cos 2πt); cells of different
 * subcarriers add by power. `offsetTurns` is what the offset leaves open; `tones` are the jumps of toneJumps at the wrap.
 * Null where nothing jumps, or where the first symbol sends nothing. Source: the shift theorem.
 */
export function seamJumpDb(content: WaveformContent, offsetTurns: number, tones: readonly ToneJump[]): number | null {
  const { fftSize } = content;
  const values = createCellValues({
    ...content,
    symbolCount: 1,
    prefixSamples: [content.prefixSamples[0]!],
    grid: { rows: [content.grid.rows[content.grid.rowOfSymbol[0]!]!], rowOfSymbol: [0] },
    peakReduction: { kind: 'none' },
    markers: [],
  });
  const cells = new Float64Array(2 * fftSize);
  values.write(0, 0, cells);
  const turnsOf = new Map(tones.map((tone) => [tone.subcarrier + Math.floor(fftSize / 2), tone.turns]));
  const plain = stepOf(-offsetTurns);
  let power = 0;
  let jump = 0;
  for (let p = 0; p < fftSize; p++) {
    const of = cells[2 * p]! * cells[2 * p]! + cells[2 * p + 1]! * cells[2 * p + 1]!;
    const turns = turnsOf.get(p);
    power += of;
    jump += of * (turns === undefined ? plain : stepOf(turns - offsetTurns));
  }
  return power > 0 && jump > 0 ? 10 * log10(jump / power) : null;
}

/** |1 − e^{j2πt}|². */
function stepOf(turns: number): number {
  return 2 - 2 * sineCosine(turns).cosine;
}
