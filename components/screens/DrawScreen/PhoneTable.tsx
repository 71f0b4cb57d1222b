import { useEffect, useMemo, useState, type ReactNode } from 'react';
import { ScrollView, StyleSheet, View } from 'react-native';
import { CanvasGate } from '@/components/canvas/CanvasGate';
import { Button } from '@/components/ui/Button';
import { Figure, FigureRow } from '@/components/ui/Figure';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { OneOf } from '@/components/ui/WordsToPress';
import { formatInteger } from '@/lib/drawing/quantities';
import { EmptyNote } from './EmptyNote';
import { BLOCK_FIGURES, figureText } from './figureWords';
import { figureOf, useLive } from './liveReader';
import { CopyButton, MeasuringNote, useViewWords } from './MarginColumn';
import { useSentenceAct, useShortSentence } from './SentenceForm';
import { ToolRail, Tray } from './Trough';
import type { TableCanvas } from './tableCanvas';
import type { TableContext } from './tableContext';
import { phonePlaces, type PhonePlaces, type ViewPage } from './tableLayout';
import { useEditorState } from './useEditorState';
import { useSize } from './useSize';
import { useViewportSize } from './useViewport';

const PAGES: readonly { value: ViewPage; label: string }[] = [
  { value: 'time', label: 'Time' },
  { value: 'spectrum', label: 'Spectrum' },
  { value: 'constellation', label: 'Constellation' },
  { value: 'ccdf', label: 'CCDF' },
  { value: 'figures', label: 'Figures' },
];

/** A phone's table: the canvas first, views one swipe away, sentence, tools and tray under the thumb. */
export function PhoneTable({
  table,
  canvas,
  fallback,
}: {
  table: TableContext;
  canvas: TableCanvas;
  fallback: ReactNode;
}) {
  const [size, onLayout] = useSize();
  const { width, height } = size;
  const { page, setPage, rights } = table;
  const places = useMemo(() => phonePlaces(width, height, page), [width, height, page]);
  useViewportSize(table.editor, width > 0 ? places.layout.grid.width : 0, places.layout.grid.height, true);
  const { layout } = places;
  const { setLayout } = table;
  useEffect(() => {
    if (width > 0) setLayout(layout);
  }, [setLayout, layout, width]);
  const swipe = (step: -1 | 1) => {
    const at = PAGES.findIndex(({ value }) => value === page) + step;
    const next = PAGES[Math.max(0, Math.min(PAGES.length - 1, at))]!;
    setPage(next.value);
  };
  return (
    <View style={styles.fill}>
      <View id="table" style={styles.table} onLayout={onLayout}>
        {width > 0 ? (
          <>
            <CanvasGate
              {...canvas}
              onSwipe={swipe}
              editor={table.editor}
              live={table.live}
              layout={places.layout}
              fallback={fallback}
            />
            <EmptyNote table={table} layout={places.layout} />
            <View id="views" role="region" aria-label="Views" style={[styles.tabs, { top: places.tabsY }]}>
              <OneOf bare label="View" choices={PAGES} value={page} onChange={setPage} style={styles.tabWords} />
            </View>
            <ViewHead table={table} places={places} />
          </>
        ) : null}
      </View>
      {rights.canDraw ? (
        <>
          <PhoneSentence table={table} />
          <View id="trough" role="region" aria-label="Tools and tray" {...({ tabIndex: -1 } as object)}>
            <ToolRail table={table} phone />
            <Tray table={table} phone />
          </View>
        </>
      ) : null}
    </View>
  );
}

function ViewHead({ table, places }: { table: TableContext; places: PhonePlaces }) {
  const words = useViewWords(table);
  const { page } = table;
  const figures = useLive(table.live, (state) => state.result?.figures);
  const isStale = useLive(table.live, (state) => state.isStale);
  const papr = figureOf(figures, 'paprFrame');
  if (page === 'figures') {
    return (
      <ScrollView
        style={[styles.figures, { top: places.viewHeadY, height: places.view.height + 26 }]}
        contentContainerStyle={styles.figureRows}
      >
        {BLOCK_FIGURES.map((id) => {
          const figure = figureOf(figures, id);
          if (!figure) return null;
          const { value, unit } = figureText(figure);
          return (
            <FigureRow
              key={id}
              name={figure.name}
              value={value}
              unit={unit}
              {...(isStale ? { verdict: 'stale', verdictTone: 'quiet' } : {})}
            />
          );
        })}
        <View style={styles.copy}>
          <CopyButton table={table} view="figures" />
        </View>
      </ScrollView>
    );
  }
  return (
    <View style={[styles.viewHead, { top: places.viewHeadY }]}>
      <Text variant="label" weight={400} tone="quiet" numberOfLines={1} style={styles.viewWords}>
        {words[page]}
      </Text>
      <MeasuringNote table={table} />
      {page === 'time' && papr?.value !== null && papr ? (
        <Text variant="label" weight={400} tone="quiet">
          {'PAPR '}
          <Figure {...figureText(papr)} variant="figureSmall" stale={isStale} />
        </Text>
      ) : (
        <CopyButton table={table} view={page} />
      )}
    </View>
  );
}

/** The sentence shortened: "Change" opens its blanks in a sheet. */
function PhoneSentence({ table }: { table: TableContext }) {
  const parts = useShortSentence(table.editor);
  const { count, act, perform, reach } = useSentenceAct(table);
  const notice = useEditorState(table.editor, (state) => state.notice);
  const [wrong, setWrong] = useState<string | null>(null);
  const said = notice ?? wrong;
  return (
    <View id="sentence" role="form" aria-label="Tool" style={styles.sentence}>
      <Text variant="small" tone="quiet" numberOfLines={2} style={styles.sentenceWords}>
        {said ? (
          <Text variant="small" tone="danger" role="alert">
            {said}
          </Text>
        ) : (
          <>
            {parts.map((part, i) =>
              typeof part === 'number' ? (
                <Text key={i} variant="figureSmall" tone="strong">{`${formatInteger(part)} `}</Text>
              ) : (
                <Text key={i} variant="small" weight={i === 0 ? 600 : 400} tone={i === 0 ? 'strong' : 'quiet'}>
                  {`${part} `}
                </Text>
              ),
            )}
            {act === 'Paint' ? 'paints ' : ''}
            {act === 'Paint' ? (
              <Text variant="figureSmall" tone="strong">
                {formatInteger(count)}
              </Text>
            ) : null}
            {act === 'Paint' ? (count === 1 ? ' cell' : ' cells') : ''}
            {reach ? `. ${reach}` : ''}
          </>
        )}
      </Text>
      <Button kind="plain" onPress={() => table.open({ kind: 'sentence' })}>
        Change
      </Button>
      {act ? (
        <Button kind={table.sheet ? 'ruled' : 'filled'} onPress={() => setWrong(perform())}>
          {act}
        </Button>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  fill: { flex: 1, minHeight: 0 },
  table: { flex: 1, minHeight: 0, overflow: 'hidden', backgroundColor: color.surface.desk },
  tabs: {
    position: 'absolute',
    left: 0,
    right: 0,
    height: 44,
    backgroundColor: color.surface.sheet,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.line,
  },
  tabWords: { flex: 1 },
  viewHead: {
    position: 'absolute',
    left: 12,
    right: 12,
    height: 22,
    flexDirection: 'row',
    alignItems: 'center',
    gap: 8,
  },
  viewWords: { flexGrow: 1, flexShrink: 1 },
  figures: { position: 'absolute', left: 0, right: 0 },
  figureRows: { paddingHorizontal: 12 },
  copy: { alignSelf: 'flex-start' },
  sentence: {
    height: 56,
    flexDirection: 'row',
    alignItems: 'center',
    gap: 4,
    paddingLeft: 12,
    paddingRight: 8,
    backgroundColor: color.surface.sheet,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
  sentenceWords: { flex: 1, fontSize: 14, lineHeight: 19 },
});
