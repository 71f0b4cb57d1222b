import { Pressable, StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Text } from '@/components/ui/Text';
import { copyAndSay } from '@/components/ui/copyText';
import { Figure } from '@/components/ui/Figure';
import { color } from '@/components/ui/theme';
import { OneOf } from '@/components/ui/WordsToPress';
import { formatInteger, formatQuantity } from '@/lib/drawing/quantities';
import { inkWord } from '@/lib/drawing/inkStyle';
import { lowestOf } from '@/lib/editor/document';
import type { LiveFigure } from '@/lib/editor/live/protocol';
import { BLOCK_FIGURES, copyFigures, copyView, figureText, shortName } from './figureWords';
import { figureOf, useLive } from './liveReader';
import type { TableContext } from './tableContext';
import type { ViewPage, WidePlaces } from './tableLayout';
import { useEditorState, useShownSettings } from './useEditorState';

type CopiedView = 'time' | 'spectrum' | 'constellation' | 'ccdf' | 'figures';

export function CopyButton({ table, view }: { table: TableContext; view: CopiedView }) {
  const copy = () => {
    const { result } = table.live.get();
    if (!result) return;
    const words = view === 'figures' ? copyFigures(result.figures) : copyView(view, result);
    void copyAndSay(words, 'Figures copied');
  };
  return (
    <Button kind="plain" size="small" label={`Copy the figures of ${VIEW_NAMES[view]}`} onPress={copy}>
      Copy
    </Button>
  );
}

const VIEW_NAMES: Record<CopiedView, string> = {
  time: 'the time view',
  spectrum: 'the spectrum',
  constellation: 'the constellation',
  ccdf: 'the CCDF',
  figures: 'the title block',
};

/** What a view is of, in words: also what stands in for the picture where it is read aloud. */
export function useViewWords(
  table: TableContext,
): Record<'time' | 'constellation' | 'ccdf' | 'spectrum' | 'cells', string> {
  const { editor } = table;
  const { tray, fftSize } = useShownSettings(editor);
  const symbol = useEditorState(editor, (state) => state.chosenSymbol);
  const ink = useEditorState(editor, (state) => state.ink);
  const cursor = useEditorState(editor, (state) => state.cursor);
  const chosen = tray[ink];
  return {
    time: `symbol ${symbol}, envelope over RMS`,
    cells: `at ${formatInteger(cursor.position + lowestOf(fftSize))}, symbol ${cursor.symbol}`,
    constellation: chosen ? (chosen.role === 'data' ? inkWord(chosen) : chosen.name) : '',
    ccdf: 'power over mean, per sample',
    spectrum: 'density over the mean used cell',
  };
}

function Head({
  x,
  y,
  width,
  name,
  words,
  children,
}: {
  x: number;
  y: number;
  width: number;
  name: string;
  words: string;
  children?: React.ReactNode;
}) {
  return (
    <View style={[styles.head, { left: x, top: y, width }]}>
      <Text variant="small" weight={600} tone="strong" heading={2}>
        {name}
      </Text>
      <Text variant="label" weight={400} tone="quiet" numberOfLines={1} style={styles.words}>
        {words}
      </Text>
      {children}
    </View>
  );
}

/** "Measured when you pause.", or how far a long frame is. */
export function MeasuringNote({ table }: { table: TableContext }) {
  const progress = useLive(table.live, (state) => state.progress);
  const isStale = useLive(table.live, (state) => state.isStale);
  const message = useLive(table.live, (state) => (state.hasStopped ? null : state.message));
  if (message)
    return (
      <Text variant="label" tone="danger" role="status">
        {message}
      </Text>
    );
  if (!progress || !isStale) return null;
  return (
    <Text variant="label" weight={400} tone="quiet" role="status">
      {`Measured when you pause. ${formatInteger(progress.done)} of ${formatInteger(progress.done + progress.toDo)} symbols`}
    </Text>
  );
}

/** Time, cells, constellation, CCDF and the title block, beside the main column. */
export function MarginColumn({ table, places }: { table: TableContext; places: WidePlaces }) {
  const words = useViewWords(table);
  const { marginX: x, marginWidth: width } = places;
  if (places.pageTop !== null) return <PagedMargin table={table} places={places} />;
  const half = (width - 12) / 2;
  return (
    <>
      <Head x={x} y={places.timeHead} width={width} name="Time" words={words.time}>
        <CopyButton table={table} view="time" />
      </Head>
      <Head x={x} y={places.cellsHead} width={half} name="Cells" words={words.cells} />
      <Head x={x + half + 12} y={places.cellsHead} width={half} name="Constellation" words={words.constellation}>
        <CopyButton table={table} view="constellation" />
      </Head>
      <Head x={x} y={places.ccdfHead} width={width} name="CCDF" words={words.ccdf}>
        <MeasuringNote table={table} />
        <CopyButton table={table} view="ccdf" />
      </Head>
      <View style={[styles.block, { left: x, top: places.titleBlock, width }]}>
        <TitleBlock table={table} />
      </View>
    </>
  );
}

const MARGIN_PAGES: readonly { value: ViewPage; label: string }[] = [
  { value: 'time', label: 'Time' },
  { value: 'constellation', label: 'Constellation' },
  { value: 'ccdf', label: 'CCDF' },
  { value: 'figures', label: 'Figures' },
];

function PagedMargin({ table, places }: { table: TableContext; places: WidePlaces }) {
  const words = useViewWords(table);
  const { marginX: x, marginWidth: width } = places;
  const { page, setPage } = table;
  const shown = page === 'spectrum' ? 'time' : page;
  return (
    <>
      <View style={[styles.tabs, { left: x, width }]}>
        <OneOf bare label="Views" choices={MARGIN_PAGES} value={shown} onChange={setPage} />
      </View>
      {shown === 'figures' ? (
        <View style={[styles.block, { left: x, top: 52, width }]}>
          <TitleBlock table={table} />
        </View>
      ) : (
        <Head x={x} y={44} width={width} name="" words={words[shown]}>
          <MeasuringNote table={table} />
          <CopyButton table={table} view={shown} />
        </Head>
      )}
    </>
  );
}

/** The waveform's figures as ruled cells. Out of date they are greyed at once. */
export function TitleBlock({ table }: { table: TableContext }) {
  const figures = useLive(table.live, (state) => state.result?.figures);
  const isStale = useLive(table.live, (state) => state.isStale);
  return (
    <View
      role="group"
      aria-label={isStale ? 'Figures, out of date' : 'Figures'}
      style={styles.titleBlock}
      {...({ dataSet: { stale: isStale ? '1' : '0' } } as object)}
    >
      {BLOCK_FIGURES.map((id, i) => (
        <BlockCell
          key={id}
          figure={figureOf(figures, id)}
          stale={isStale}
          last={i % 4 === 3}
          lowest={i >= BLOCK_FIGURES.length - 4}
        />
      ))}
    </View>
  );
}

function BlockCell({
  figure,
  stale,
  last,
  lowest,
}: {
  figure: LiveFigure | null;
  stale: boolean;
  last: boolean;
  lowest: boolean;
}) {
  const text = figure ? figureText(figure) : { value: '', unit: '' };
  const copy = () => {
    if (!figure) return;
    const words = [text.value, text.unit].filter(Boolean).join(' ');
    void copyAndSay(words, `${figure.name} copied`);
  };
  return (
    <Pressable
      role="button"
      aria-label={
        figure ? `${figure.name}, ${text.value} ${text.unit}${stale ? ', out of date' : ''}, copy` : 'measuring'
      }
      onPress={copy}
      {...({ title: figure?.note ?? undefined, dataSet: { figure: figure?.id ?? '' } } as object)}
      style={[styles.cell, last ? null : styles.right, lowest ? null : styles.under]}
    >
      <Text variant="label" weight={400} tone="quiet" numberOfLines={1}>
        {figure ? shortName(figure) : ' '}
      </Text>
      <Figure value={text.value} unit={text.unit} stale={stale} />
    </Pressable>
  );
}

/** The spectrum's own figures at its right. */
export function SpectrumFigures({ table, places }: { table: TableContext; places: WidePlaces }) {
  const spectrum = useLive(table.live, (state) => state.result?.spectrum ?? null);
  const figures = useLive(table.live, (state) => state.result?.figures);
  const isStale = useLive(table.live, (state) => state.isStale);
  const { x, y } = places.spectrumFigures;
  const rbw = spectrum ? formatQuantity(spectrum.rbwHz, 'Hz', 3) : null;
  const rows: { name: string; value: string; unit: string }[] = [
    ...(rbw ? [{ name: 'RBW', ...rbw }] : []),
    ...(['occupiedBand', 'paintedSpan', 'loadedBand'] as const).flatMap((id) => {
      const figure = figureOf(figures, id);
      return figure ? [{ name: figure.name, ...figureText(figure) }] : [];
    }),
  ];
  return (
    <View style={[styles.spectrum, { left: x, top: y }]}>
      <View style={styles.spectrumHead}>
        <Text variant="small" weight={600} tone="strong" heading={2}>
          Spectrum
        </Text>
      </View>
      {rows.map((row) => (
        <View key={row.name} style={styles.spectrumRow}>
          <Text variant="label" weight={400} tone="quiet">
            {row.name}
          </Text>
          <Figure value={row.value} unit={row.unit} variant="figureSmall" stale={isStale} />
        </View>
      ))}
      <View style={styles.copy}>
        <CopyButton table={table} view="spectrum" />
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  head: { position: 'absolute', height: 20, flexDirection: 'row', alignItems: 'center', gap: 8 },
  words: { flexGrow: 1, flexShrink: 1 },
  tabs: { position: 'absolute', top: 2, height: 40 },
  block: { position: 'absolute' },
  titleBlock: {
    flexDirection: 'row',
    flexWrap: 'wrap',
    borderWidth: 1.5,
    borderColor: color.rule.strong,
    backgroundColor: color.surface.raised,
  },
  cell: { width: '25%', height: 45, paddingHorizontal: 7, paddingTop: 4, overflow: 'hidden' },
  right: { borderRightWidth: 1, borderRightColor: color.rule.line },
  under: { borderBottomWidth: 1, borderBottomColor: color.rule.line },
  spectrum: { position: 'absolute', width: 92 },
  spectrumHead: { height: 20 },
  spectrumRow: { borderTopWidth: 1, borderTopColor: color.rule.hair, paddingVertical: 2 },
  copy: { alignSelf: 'flex-start', marginLeft: -8 },
});
