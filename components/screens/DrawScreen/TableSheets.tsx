import type { DrawingStore } from './drawingStore';
import type { TableContext } from './tableContext';
export function TableSheets(_: {
  table: TableContext;
  store: DrawingStore;
  isPhone: boolean;
  oneFinger: { moves: boolean; set: (moves: boolean) => void };
  onAsked: () => void;
}) {
  return null;
}
