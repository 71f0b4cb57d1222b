import { demand } from '../errors';

/**
 * Least and largest value of each of `columns` equal shares of a series, so that a drawn line skips no peak: every value belongs to a
 * column, and a share narrower than a value repeats the value it lies in.
 * `values` from `first` on, every `stride`-th (2 for I or Q of interleaved samples), `count` of them; `out`: [min, max] per column,
 * 2·columns numbers. The buffers stay the caller's and may not alias. Throws SynthError `bad_size` for no column or no value,
 * `buffer_too_small` for a short `out`.
 */
export function decimateMinMax(
  values: Float64Array,
  first: number,
  count: number,
  columns: number,
  out: Float64Array,
  stride = 1,
): void {
  demand(columns >= 1 && count >= 1, 'bad_size', 'A curve needs a column and a value.');
  demand(out.length >= 2 * columns, 'buffer_too_small', 'Two numbers a column.');
  for (let column = 0; column < columns; column++) {
    const from = Math.floor((column * count) / columns);
    const to = Math.max(from + 1, Math.floor(((column + 1) * count) / columns));
    let least = values[first + from * stride]!;
    let largest = least;
    for (let i = from + 1; i < to; i++) {
      const value = values[first + i * stride]!;
      if (value < least) least = value;
      if (value > largest) largest = value;
    }
    out[2 * column] = least;
    out[2 * column + 1] = largest;
  }
}

/** The same for the envelope |x| of interleaved samples, `first` and `count` in samples. */
export function decimateEnvelope(
  samples: Float64Array,
  first: number,
  count: number,
  columns: number,
  out: Float64Array,
): void {
  demand(columns >= 1 && count >= 1, 'bad_size', 'A curve needs a column and a sample.');
  demand(out.length >= 2 * columns, 'buffer_too_small', 'Two numbers a column.');
  for (let column = 0; column < columns; column++) {
    const from = Math.floor((column * count) / columns);
    const to = Math.max(from + 1, Math.floor(((column + 1) * count) / columns));
    let least = Infinity;
    let largest = 0;
    for (let i = first + from; i < first + to; i++) {
      const re = samples[2 * i]!;
      const im = samples[2 * i + 1]!;
      const power = re * re + im * im;
      if (power < least) least = power;
      if (power > largest) largest = power;
    }
    out[2 * column] = Math.sqrt(least);
    out[2 * column + 1] = Math.sqrt(largest);
  }
}
