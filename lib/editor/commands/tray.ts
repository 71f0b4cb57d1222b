import type { Ink, Stream } from '@/lib/synth/index';
import { formatInteger } from '@/lib/drawing/quantities';
import { countCells } from '../document';
import type { EditorDocument } from '../document';
import { cellsLabel } from '../paint';
import { diffRow, pushRow } from '../patch';
import type { CellRows, Patch } from '../types';
import type { Outcome } from './outcome';
import { planSettings } from './settings';

export const INKS_MOST = 64;
export const STREAMS_MOST = 8;

type InkBody = Ink extends infer T ? (T extends Ink ? Omit<T, 'inkId'> : never) : never;

/** Adds an ink at the end of the tray. */
export function planAddInk(document: EditorDocument, ink: InkBody): Outcome {
  const { tray } = document.settings;
  if (tray.length >= INKS_MOST) return { kind: 'refused', message: `The tray is full: it holds ${INKS_MOST} inks.` };
  const added = { inkId: `k${tray.length}`, ...ink } as Ink;
  return planSettings(document, { tray: [...tray, added] }, `Add ink “${ink.name}”`);
}

/** Changes one ink and so every cell painted with it. Ink 0 is the bare paper and stays. */
export function planChangeInk(document: EditorDocument, place: number, ink: InkBody): Outcome {
  if (place === 0) return { kind: 'refused', message: 'The null ink is the bare paper: it cannot change.' };
  const { tray } = document.settings;
  const changed = { inkId: `k${place}`, ...ink } as Ink;
  const next = tray.map((other, at) => (at === place ? changed : other));
  const cells = countCells(document)[place] ?? 0;
  const label = cells > 0 ? cellsLabel(`Change “${ink.name}”,`, cells) : `Change “${ink.name}”`;
  return planSettings(document, { tray: next }, label);
}

/** Takes an ink out; its cells become null and the later inks move up. A question when it holds cells. */
export function planRemoveInk(document: EditorDocument, place: number): Outcome {
  const { tray, fftSize, symbolCount } = document.settings;
  const ink = tray[place];
  if (!ink) return null;
  if (place === 0) return { kind: 'refused', message: 'The null ink is the bare paper: it stays.' };
  const next = tray.filter((_, at) => at !== place).map((other, at) => ({ ...other, inkId: `k${at}` }));
  const rows: CellRows[] = [];
  for (let symbol = 0; symbol < symbolCount; symbol++) {
    const before = document.cells.subarray(symbol * fftSize, (symbol + 1) * fftSize);
    const after = before.map((held) => (held === place ? 0 : held > place ? held - 1 : held));
    const row = diffRow(symbol, before, after);
    if (row) pushRow(rows, row);
  }
  const patch: Patch = {
    label: `Remove ink “${ink.name}”`,
    changes: [
      ...(rows.length > 0 ? [{ kind: 'cells', rows } as const] : []),
      { kind: 'tray', before: tray, after: next },
    ],
  };
  const held = countCells(document)[place] ?? 0;
  if (held === 0) return { kind: 'patch', patch };
  const text = `“${ink.name}” holds ${formatInteger(held)} ${held === 1 ? 'cell' : 'cells'}. They would become null.`;
  return { kind: 'question', question: { text, doLabel: 'Remove it', keepLabel: `Keep “${ink.name}”`, patch } };
}

/** Adds a payload stream at the end of the list. */
export function planAddStream(document: EditorDocument, stream: Omit<Stream, 'streamId'>): Outcome {
  const { streams } = document.settings;
  if (streams.length >= STREAMS_MOST)
    return { kind: 'refused', message: `There are ${STREAMS_MOST} payload streams already.` };
  const added = { streamId: `s${streams.length}`, ...stream };
  return planSettings(document, { streams: [...streams, added] }, `Add payload “${stream.name}”`);
}

export function planChangeStream(document: EditorDocument, place: number, stream: Omit<Stream, 'streamId'>): Outcome {
  const { streams } = document.settings;
  const next = streams.map((other, at) => (at === place ? { streamId: `s${place}`, ...stream } : other));
  return planSettings(document, { streams: next }, `Change payload “${stream.name}”`);
}

/** Takes a payload stream out; refused while an ink takes bits from it. Later streams move up, with their inks. */
export function planRemoveStream(document: EditorDocument, place: number): Outcome {
  const { streams, tray } = document.settings;
  const removed = streams[place];
  if (!removed) return null;
  const user = tray.find((ink) => ink.role === 'data' && ink.value.streamId === removed.streamId);
  if (user) return { kind: 'refused', message: `“${user.name}” takes its bits from “${removed.name}”.` };
  const placeOf = (streamId: string) => {
    const at = Number(streamId.slice(1));
    return `s${at > place ? at - 1 : at}`;
  };
  const nextStreams = streams
    .filter((_, at) => at !== place)
    .map((stream) => ({ ...stream, streamId: placeOf(stream.streamId) }));
  const nextTray = tray.map((ink) =>
    ink.role === 'data' ? { ...ink, value: { ...ink.value, streamId: placeOf(ink.value.streamId) } } : ink,
  );
  return planSettings(document, { streams: nextStreams, tray: nextTray }, `Remove payload “${removed.name}”`);
}
