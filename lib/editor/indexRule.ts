import type { Factor, Ink } from '@/lib/synth';
import { lowestOf } from './document';
import type { EditorDocument } from './document';
import type { Span } from './types';

/** The counters' starts that narrow where an ink may stand: index = counter + start must not be below zero. */
interface Floor {
  position: number;
  symbol: number;
  /** A count that starts below zero: its first cell breaks the rule wherever it stands. */
  nowhere: number | null;
}

function factorsOf(ink: Ink): readonly Factor[] {
  return ink.role === 'pilot' || ink.role === 'tone' ? ink.value.factors : [];
}

function floorOf(ink: Ink): Floor {
  const floor: Floor = { position: 0, symbol: 0, nowhere: null };
  for (const { counter, start } of factorsOf(ink)) {
    if (counter === 'subcarrier') floor.position = Math.max(floor.position, -start);
    else if (counter === 'symbol') floor.symbol = Math.max(floor.symbol, -start);
    else if (start < 0) floor.nowhere = start;
  }
  return floor;
}

const signed = (n: number) => (n < 0 ? `\u2212${-n}` : `${n}`);

function refusal(ink: Ink, floor: Floor, { settings }: Pick<EditorDocument, 'settings'>): string {
  if (floor.nowhere !== null)
    return `“${ink.name}” counts its cells from ${signed(floor.nowhere)}: no cell can hold it before its count starts at 0 or more.`;
  if (floor.position >= settings.fftSize || floor.symbol >= settings.symbolCount)
    return `“${ink.name}” would need an index below zero in every cell of this grid.`;
  const place = [
    ...(floor.position > 0 ? [`subcarrier ${signed(floor.position + lowestOf(settings.fftSize))}`] : []),
    ...(floor.symbol > 0 ? [`symbol ${floor.symbol}`] : []),
  ];
  return `“${ink.name}” would need an index below zero here. The first place it can stand is ${place.join(', ')}.`;
}

/** Why spans cannot hold an ink (its name and the first place it can hold); null when they can. */
export function indexRefusal(document: EditorDocument, spans: readonly Span[], ink: number): string | null {
  const painted = document.settings.tray[ink];
  if (!painted || spans.length === 0) return null;
  const floor = floorOf(painted);
  const breaks =
    floor.nowhere !== null || spans.some((span) => span.from < floor.position || span.symbol < floor.symbol);
  return breaks ? refusal(painted, floor, document) : null;
}

/** The same question for a whole grid, after a change of an ink or of the size; null when every painted cell may stand. */
export function gridRefusal(document: Pick<EditorDocument, 'settings' | 'cells'>): string | null {
  const { settings, cells } = document;
  const floors = settings.tray.map(floorOf);
  const isFree = floors.every((floor) => floor.nowhere === null && floor.position <= 0 && floor.symbol <= 0);
  if (isFree) return null;
  for (let symbol = 0, at = 0; symbol < settings.symbolCount; symbol++) {
    for (let position = 0; position < settings.fftSize; position++, at++) {
      const ink = cells[at]!;
      const floor = floors[ink];
      if (floor && (floor.nowhere !== null || position < floor.position || symbol < floor.symbol))
        return refusal(settings.tray[ink]!, floor, document);
    }
  }
  return null;
}
