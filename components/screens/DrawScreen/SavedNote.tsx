import { Text } from '@/components/ui/Text';
import type { SaveState } from '@/lib/client/autosave';
import { clockTime } from '../when';
import type { TableContext } from './tableContext';

/** "saved 12:04", "saving", "not saved: no connection", "not saved: somebody saved first". */
export function savedWords(state: SaveState): string {
  switch (state.kind) {
    case 'saved':
      return `saved ${clockTime(state.atMs)}`;
    case 'changed':
    case 'saving':
      return 'saving';
    case 'offline':
      return 'not saved: no connection';
    case 'stale':
      return 'not saved: somebody saved first';
    case 'refused':
      return 'not saved';
  }
}

export function SavedNote({ table }: { table: TableContext }) {
  const { saveState, saver } = table;
  if (!saver) return null;
  const isWrong = saveState.kind === 'offline' || saveState.kind === 'stale' || saveState.kind === 'refused';
  return (
    <Text
      variant="small"
      tone={isWrong ? 'warning' : 'quiet'}
      role="status"
      numberOfLines={1}
      style={{ flexShrink: 0 }}
    >
      {savedWords(saveState)}
    </Text>
  );
}
