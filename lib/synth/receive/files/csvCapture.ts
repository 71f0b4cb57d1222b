import type { SampleSource } from '../../measure/reconstructedPeak';
import type { ByteSource } from './captureLayout';

const BLOCK_BYTES = 1048576;
/** Rows between two places of the index. */
const STRIDE_ROWS = 4096;
const LINE_FEED = 0x0a;
const LINE_MOST = 4096;
/** How programs write a value that is not a number, or an infinite one. */
const NOT_A_NUMBER = /^[+-]?(nan|inf|infinity)$/i;

/** A text capture's rows, indexed. */
export interface CsvRows {
  samples: number;
  /** Byte of row 0, STRIDE_ROWS, 2·STRIDE_ROWS, … */
  offsets: Float64Array;
  /** Columns of I and Q. */
  columns: [i: number, q: number];
}

export type CsvOutcome = { ok: true; rows: CsvRows } | { ok: false; message: string };

const fieldsOf = (line: string): string[] => line.trim().split(/[,;\t ]+/);
const isNumber = (field: string | undefined): boolean =>
  field !== undefined && field !== '' && (Number.isFinite(Number(field)) || NOT_A_NUMBER.test(field));

/**
 * Finds the rows of a text file: numbers with a decimal dot, separated by comma, semicolon, tab or space; lines before the first row of
 * numbers are a head, in which columns named I and Q are looked for (else the first two, for one column of a split capture the first).
 * A generator: each `yield` is the share done.
 */
export function* indexCsv(source: ByteSource, isSplit: boolean): Generator<number, CsvOutcome> {
  const start = new Uint8Array(Math.min(source.bytes, 65536));
  source.read(0, start.length, start);
  let first = 0;
  let columns: [number, number] | null = null;
  let named: [number, number] | null = null;
  let head = 0;
  for (const line of String.fromCharCode(...chunked(start)).split('\n')) {
    const fields = fieldsOf(line);
    if (isNumber(fields[0]) && (isSplit || isNumber(fields[1]))) {
      columns = named ?? (isSplit ? [0, 0] : [0, 1]);
      break;
    }
    const names = fields.map((field) => field.replace(/"/g, '').toLowerCase());
    const i = names.indexOf('i');
    const q = names.indexOf('q');
    if (i >= 0 && q >= 0) named = [i, q];
    first += line.length + 1;
    if (++head > 100) break;
  }
  if (columns === null) return { ok: false, message: 'The text file has no row of numbers.' };
  const offsets: number[] = [];
  let samples = 0;
  let at = first;
  let rowAt = first;
  let isBlank = true;
  const block = new Uint8Array(BLOCK_BYTES);
  const endRow = (next: number): void => {
    if (!isBlank) {
      if (samples % STRIDE_ROWS === 0) offsets.push(rowAt);
      samples++;
    }
    rowAt = next;
    isBlank = true;
  };
  while (at < source.bytes) {
    const count = Math.min(BLOCK_BYTES, source.bytes - at);
    source.read(at, count, block);
    for (let i = 0; i < count; i++) {
      const byte = block[i]!;
      if (byte === LINE_FEED) endRow(at + i + 1);
      else if (byte > 0x20) isBlank = false;
      if (at + i - rowAt > LINE_MOST)
        return { ok: false, message: 'A line of the text file is longer than 4096 characters.' };
    }
    at += count;
    yield at / source.bytes;
  }
  endRow(at);
  return { ok: true, rows: { samples, offsets: Float64Array.from(offsets), columns } };
}

/** Text in pieces that a call can take as arguments: the head alone. */
function chunked(bytes: Uint8Array): number[] {
  return Array.from(bytes.subarray(0, 16384));
}

/** The samples of indexed rows: I and Q as written, full scale 1. Text reads as 0, "nan" and "inf" as NaN. Split: `sourceQ` holds the other column. */
export function csvSource(
  source: ByteSource,
  rows: CsvRows,
  split: { source: ByteSource; rows: CsvRows } | null,
): SampleSource {
  const readI = createColumnReader(source, rows);
  const readQ = split === null ? null : createColumnReader(split.source, split.rows);
  return {
    samples: split === null ? rows.samples : Math.min(rows.samples, split.rows.samples),
    read(first, count, out) {
      readI(first, count, (row, fields) => {
        out[2 * row] = numberOf(fields[rows.columns[0]]);
        if (readQ === null) out[2 * row + 1] = numberOf(fields[rows.columns[1]]);
      });
      readQ?.(first, count, (row, fields) => (out[2 * row + 1] = numberOf(fields[0])));
    },
  };
}

function numberOf(field: string | undefined): number {
  const value = Number(field);
  if (Number.isFinite(value)) return value;
  return field !== undefined && NOT_A_NUMBER.test(field) ? NaN : 0;
}

type RowReader = (first: number, count: number, found: (row: number, fields: string[]) => void) => void;

function createColumnReader(source: ByteSource, { offsets }: CsvRows): RowReader {
  const block = new Uint8Array(65536);
  return (first, count, found) => {
    let row = Math.floor(first / STRIDE_ROWS) * STRIDE_ROWS;
    let at = offsets[row / STRIDE_ROWS] ?? 0;
    let line = '';
    const end = first + count;
    while (row < end && at < source.bytes) {
      const part = Math.min(block.length, source.bytes - at);
      source.read(at, part, block);
      for (let i = 0; i < part && row < end; i++) {
        if (block[i] !== LINE_FEED) {
          line += String.fromCharCode(block[i]!);
          continue;
        }
        if (line.trim() !== '') {
          if (row >= first) found(row - first, fieldsOf(line));
          row++;
        }
        line = '';
      }
      at += part;
    }
    if (line.trim() !== '' && row >= first && row < end) found(row - first, fieldsOf(line));
  };
}
