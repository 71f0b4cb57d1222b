import { readCsvNumber, writeCsvNumber } from './csvNumbers';
import { CSV_CELL } from './layout';

const COMMA = 0x2c;
const LINE_FEED = 0x0a;

/**
 * Single precision words (the low byte first) as lines of text: `columns` of the two words from word `column` on, each of
 * CSV_CELL bytes with a comma or, in the last column, a line feed.
 */
export function writeCsvLines(
  words: Uint8Array,
  count: number,
  column: number,
  columns: number,
  text: Uint8Array,
): void {
  const view = new DataView(words.buffer, words.byteOffset, 8 * count);
  let to = 0;
  for (let i = 0; i < count; i++) {
    for (let c = 0; c < columns; c++, to += CSV_CELL) {
      writeCsvNumber(view.getFloat32(8 * i + 4 * (column + c), true), text, to);
      text[to + CSV_CELL - 1] = c === columns - 1 ? LINE_FEED : COMMA;
    }
  }
}

/** The same back; a cell that is not as it is written gives NaN. */
export function readCsvLines(
  text: Uint8Array,
  count: number,
  column: number,
  columns: number,
  words: Uint8Array,
): void {
  const view = new DataView(words.buffer, words.byteOffset, 8 * count);
  let from = 0;
  for (let i = 0; i < count; i++) {
    for (let c = 0; c < columns; c++, from += CSV_CELL) {
      const isEndRight = text[from + CSV_CELL - 1] === (c === columns - 1 ? LINE_FEED : COMMA);
      view.setFloat32(8 * i + 4 * (column + c), isEndRight ? readCsvNumber(text, from) : NaN, true);
    }
  }
}
