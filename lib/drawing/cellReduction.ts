/** Teeth of pilots and tones are drawn this wide where they stand far enough apart; tones always. */
export const TOOTH_PX = 2;
export const TOOTH_PITCH_PX_LEAST = 6;

/**
 * One row of cells to pixel columns when a cell is narrower than a pixel: each cell belongs to one column (by its left
 * edge), the column takes the ink whose priority comes first. `priorities` by ink number, 0 first; −1 in `out` where no
 * cell falls. `firstPosition` may be broken or outside of the row.
 */
export function reduceRow(
  row: Uint8Array,
  firstPosition: number,
  subcarrierPx: number,
  priorities: readonly number[],
  out: Int16Array,
): void {
  out.fill(-1);
  const from = Math.max(0, Math.floor(firstPosition));
  const to = Math.min(row.length, Math.ceil(firstPosition + out.length / subcarrierPx));
  for (let p = from; p < to; p++) {
    const column = Math.floor((p - firstPosition) * subcarrierPx);
    if (column < 0 || column >= out.length) continue;
    const ink = row[p]!;
    const held = out[column]!;
    if (held < 0 || priorities[ink]! < priorities[held]! || (priorities[ink] === priorities[held] && ink > held))
      out[column] = ink;
  }
}

/**
 * How wide a tooth is drawn: pilots 2 px where the teeth of a row stand at least 6 px apart, else 1 px; tones always 2.
 * `pitchPx` is the distance of neighbouring teeth (Infinity for a lone one).
 */
export function toothWidthPx(style: 'pilot' | 'tone', pitchPx: number, cellPx: number): number {
  if (cellPx >= TOOTH_PX) return cellPx;
  return style === 'tone' || pitchPx >= TOOTH_PITCH_PX_LEAST ? TOOTH_PX : Math.max(1, cellPx);
}

/**
 * The least distance between neighbouring cells of an ink along a row, in cells; Infinity when there are fewer than two
 * apart from each other (a run of neighbours is one block, not a comb).
 */
export function toothPitch(row: Uint8Array, ink: number): number {
  let last = -1;
  let least = Infinity;
  for (let p = 0; p < row.length; p++) {
    if (row[p] !== ink) continue;
    if (last >= 0) least = Math.min(least, p - last);
    last = p;
  }
  return least;
}

/** As `reduceRow`, from a row's runs [length, ink, …]: costs what the runs and the columns do, not the cells. For cells below a pixel. */
export function reduceRuns(
  runs: readonly number[],
  firstPosition: number,
  subcarrierPx: number,
  priorities: readonly number[],
  out: Int16Array,
): void {
  out.fill(-1);
  const from = Math.max(0, Math.floor(firstPosition));
  const to = Math.ceil(firstPosition + out.length / subcarrierPx);
  let at = 0;
  for (let i = 0; i < runs.length && at < to; i += 2) {
    const end = at + runs[i]!;
    if (end > from) {
      const ink = runs[i + 1]!;
      const priority = priorities[ink]!;
      const first = Math.max(0, Math.floor((Math.max(at, from) - firstPosition) * subcarrierPx));
      const last = Math.min(out.length - 1, Math.floor((end - 1 - firstPosition) * subcarrierPx));
      for (let column = first; column <= last; column++) {
        const held = out[column]!;
        if (held < 0 || priority < priorities[held]! || (priority === priorities[held] && ink > held))
          out[column] = ink;
      }
    }
    at = end;
  }
}

/** As `toothPitch` for every ink of a row at once, from its runs. */
export function toothPitches(runs: readonly number[], inks: number): Float64Array {
  const pitches = new Float64Array(inks).fill(Infinity);
  const last = new Float64Array(inks).fill(-Infinity);
  let at = 0;
  for (let i = 0; i < runs.length; i += 2) {
    const length = runs[i]!;
    const ink = runs[i + 1]!;
    pitches[ink] = Math.min(pitches[ink]!, at - last[ink]!, length > 1 ? 1 : Infinity);
    at += length;
    last[ink] = at - 1;
  }
  return pitches;
}
