import { ScrollView, StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { formatInteger } from '@/lib/drawing/quantities';
import { lowestOf } from '@/lib/editor/document';
import type { TableContext } from './tableContext';
import { useChangeCount, useSettings } from './useEditorState';

const SYMBOLS_MOST = 200;
const RUNS_MOST = 60;

/** Runs of one symbol in words: "−600 to −589 Reserved". Null is left out. */
function runsOf(row: Uint8Array, lowest: number, names: readonly string[]): string[] {
  const runs: string[] = [];
  for (let from = 0; from < row.length;) {
    let to = from;
    while (to + 1 < row.length && row[to + 1] === row[from]) to++;
    const ink = row[from]!;
    if (ink !== 0) {
      const place =
        from === to ? formatInteger(from + lowest) : `${formatInteger(from + lowest)} to ${formatInteger(to + lowest)}`;
      runs.push(`${place} ${names[ink] ?? ''}`);
    }
    from = to + 1;
  }
  return runs;
}

/** In place of the canvas where none can be: the cells as runs, symbol by symbol. The forms paint as ever. */
export function CellRuns({ table }: { table: TableContext }) {
  const { editor } = table;
  useChangeCount(editor);
  const isWide = useBreakpoint() === 'wide';
  const { fftSize, symbolCount, tray } = useSettings(editor);
  const names = tray.map((ink) => ink.name);
  const lowest = lowestOf(fftSize);
  const rows = Array.from({ length: Math.min(symbolCount, SYMBOLS_MOST) }, (_, symbol) => ({
    symbol,
    runs: runsOf(editor.document.cells.subarray(symbol * fftSize, (symbol + 1) * fftSize), lowest, names),
  }));
  return (
    <View style={[styles.fill, isWide ? styles.wide : styles.narrow]}>
      <Text tone="strong">This browser cannot draw the grid. The forms do the same work.</Text>
      <ScrollView style={styles.scroll}>
        <View role="table" aria-label="Runs of cells by symbol">
          {rows.map(({ symbol, runs }) => (
            <View key={symbol} role="row" style={styles.row}>
              <View role="rowheader" style={styles.symbol}>
                <Text variant="figureSmall" tone="quiet">
                  {symbol}
                </Text>
              </View>
              <View role="cell" style={styles.runs}>
                <Text variant="small">
                  {runs.length === 0 ? 'empty' : runs.slice(0, RUNS_MOST).join(' · ')}
                  {runs.length > RUNS_MOST ? ` and ${formatInteger(runs.length - RUNS_MOST)} more runs` : ''}
                </Text>
              </View>
            </View>
          ))}
        </View>
        {symbolCount > SYMBOLS_MOST ? (
          <Text variant="small" tone="quiet">{`and ${formatInteger(symbolCount - SYMBOLS_MOST)} more symbols`}</Text>
        ) : null}
      </ScrollView>
    </View>
  );
}

const styles = StyleSheet.create({
  fill: { position: 'absolute', gap: 8 },
  wide: { left: 20, top: 44, right: 460, bottom: 12 },
  narrow: { left: 12, top: 8, right: 12, bottom: 8, zIndex: 1, backgroundColor: color.surface.desk },
  scroll: { flex: 1, backgroundColor: color.surface.sheet, borderWidth: 1, borderColor: color.rule.line },
  row: {
    flexDirection: 'row',
    gap: 12,
    paddingVertical: 4,
    paddingHorizontal: 8,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
  },
  symbol: { width: 48, alignItems: 'flex-end' },
  runs: { flex: 1 },
});
