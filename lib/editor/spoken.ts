import { inkWord } from '@/lib/drawing/inkStyle';
import { formatInteger, formatNumber } from '@/lib/drawing/quantities';
import { inkAt, lowestOf } from './document';
import type { EditorDocument } from './document';
import type { CellPoint } from './types';

/** The cell under the cursor in words: "Subcarrier 120, symbol 5, 256-QAM, 0 dB". */
export function spokenCell(document: EditorDocument, { position, symbol }: CellPoint): string {
  const { settings } = document;
  const ink = settings.tray[inkAt(document, position, symbol)];
  const place = `Subcarrier ${formatInteger(position + lowestOf(settings.fftSize))}, symbol ${formatInteger(symbol)}`;
  if (!ink || ink.role === 'null') return `${place}, null`;
  if (ink.role === 'reserved') return `${place}, reserved`;
  return `${place}, ${inkWord(ink)}, ${formatNumber(ink.powerDb, 2)} dB`;
}
