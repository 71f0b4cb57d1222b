import { useState, type ReactNode } from 'react';
import { Pressable, StyleSheet, View } from 'react-native';
import { Text } from './Text';
import { color } from './theme';

export interface TableColumn<Row> {
  key: string;
  label: string;
  /** Px; without it the column takes what is left. */
  width?: number;
  /** Figures stand at the right, under their head. */
  isFigure?: boolean;
  /** What the head sorts by; without it the column does not sort. */
  sortBy?: (row: Row) => number | string;
  cell: (row: Row) => ReactNode;
}

/** A ruled table: the head sorts and stays in sight, hair rules, no zebra. For wide screens; a phone shows cards. */
export function Table<Row>({
  label,
  columns,
  rows,
  keyOf,
  rowHeight = 52,
  isChosen,
  isCalling,
  onOpen,
  startSort,
}: {
  label: string;
  columns: readonly TableColumn<Row>[];
  rows: readonly Row[];
  keyOf: (row: Row) => string;
  rowHeight?: number;
  isChosen?: (row: Row) => boolean;
  /** A row that waits for the reader. */
  isCalling?: (row: Row) => boolean;
  /** Pressing anywhere in the row; the row's own link does the same for the keyboard. */
  onOpen?: (row: Row) => void;
  startSort?: { key: string; down: boolean };
}) {
  const [sort, setSort] = useState<{ key: string; down: boolean } | null>(startSort ?? null);
  const by = columns.find((column) => column.key === sort?.key)?.sortBy;
  const sorted = by
    ? [...rows].sort((a, b) => {
        const [x, y] = [by(a), by(b)];
        return (x < y ? -1 : x > y ? 1 : 0) * (sort!.down ? -1 : 1);
      })
    : rows;
  return (
    <View role="table" aria-label={label} style={styles.table}>
      <View role="row" style={styles.head}>
        {columns.map((column) => (
          <Head
            key={column.key}
            column={column as TableColumn<unknown>}
            sorted={sort?.key === column.key ? (sort.down ? 'descending' : 'ascending') : null}
            onSort={() =>
              setSort({ key: column.key, down: sort?.key === column.key ? !sort.down : column.isFigure === true })
            }
          />
        ))}
      </View>
      {sorted.map((row) => (
        <Line
          key={keyOf(row)}
          chosen={isChosen?.(row) ?? false}
          calling={isCalling?.(row) ?? false}
          height={rowHeight}
          {...(onOpen ? { onOpen: () => onOpen(row) } : {})}
        >
          {columns.map((column) => (
            <View key={column.key} role="cell" style={cellStyle(column as TableColumn<unknown>)}>
              {column.cell(row)}
            </View>
          ))}
        </Line>
      ))}
    </View>
  );
}

function cellStyle(column: TableColumn<unknown>) {
  return [
    column.width === undefined ? styles.rest : { width: column.width, flexShrink: 0 },
    column.isFigure ? styles.figure : null,
  ];
}

function Head({
  column,
  sorted,
  onSort,
}: {
  column: TableColumn<unknown>;
  sorted: 'ascending' | 'descending' | null;
  onSort: () => void;
}) {
  const words = (
    <Text variant="label" tone="quiet" numberOfLines={1}>
      {column.label}
      {sorted ? (
        <Text variant="label" aria-hidden>
          {sorted === 'descending' ? ' ↓' : ' ↑'}
        </Text>
      ) : null}
    </Text>
  );
  return (
    <View
      role="columnheader"
      {...({ 'aria-sort': column.sortBy ? (sorted ?? 'none') : undefined } as object)}
      style={cellStyle(column)}
    >
      {column.sortBy ? (
        <Pressable role="button" onPress={onSort} style={styles.sort}>
          {words}
        </Pressable>
      ) : (
        words
      )}
    </View>
  );
}

/** Arrows go from row to row, by the first link or button of each. */
function moveRow(from: HTMLElement, by: 1 | -1): void {
  const rows = [...(from.closest('[role=table]')?.querySelectorAll<HTMLElement>('[data-row]') ?? [])];
  const at = rows.findIndex((row) => row.contains(from));
  rows[at + by]?.querySelector<HTMLElement>('a[href],[role=button]')?.focus();
}

function Line({
  children,
  chosen,
  calling,
  height,
  onOpen,
}: {
  children: ReactNode;
  chosen: boolean;
  calling: boolean;
  height: number;
  onOpen?: () => void;
}) {
  const [hovered, setHovered] = useState(false);
  const ground =
    hovered && onOpen ? color.surface.hover : chosen || calling ? color.surface.raised : color.surface.sheet;
  return (
    <View
      role="row"
      style={[
        styles.row,
        { minHeight: height, backgroundColor: ground },
        chosen ? styles.chosen : calling ? styles.calling : null,
        onOpen ? ({ cursor: 'pointer' } as object) : null,
      ]}
      {...({
        dataSet: { row: '1' },
        onMouseEnter: () => setHovered(true),
        onMouseLeave: () => setHovered(false),
        onClick: onOpen
          ? (event: { target: HTMLElement }) => {
              if (!event.target.closest('a,[role=button],[role=radio],input') && !getSelection()?.toString()) onOpen();
            }
          : undefined,
        onKeyDown: (event: { key: string; target: HTMLElement; preventDefault: () => void }) => {
          if (event.key !== 'ArrowDown' && event.key !== 'ArrowUp') return;
          event.preventDefault();
          moveRow(event.target, event.key === 'ArrowDown' ? 1 : -1);
        },
      } as object)}
    >
      {children}
    </View>
  );
}

const styles = StyleSheet.create({
  table: { borderWidth: 1, borderColor: color.rule.line, backgroundColor: color.surface.sheet },
  head: {
    position: 'sticky' as 'absolute',
    top: 0,
    zIndex: 2,
    flexDirection: 'row',
    alignItems: 'center',
    height: 36,
    paddingHorizontal: 20,
    gap: 20,
    backgroundColor: color.surface.sheet,
    borderBottomWidth: 1.5,
    borderBottomColor: color.rule.strong,
  },
  sort: { height: 34, justifyContent: 'center' },
  row: {
    position: 'relative',
    flexDirection: 'row',
    alignItems: 'center',
    paddingLeft: 17,
    paddingRight: 20,
    paddingVertical: 6,
    gap: 20,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
    borderLeftWidth: 3,
    borderLeftColor: 'transparent',
  },
  chosen: { borderLeftColor: color.ink.strong },
  calling: { borderLeftColor: color.stamp.inReview },
  rest: { flexGrow: 1, flexShrink: 1, flexBasis: 0, minWidth: 120 },
  figure: { alignItems: 'flex-end' },
});
