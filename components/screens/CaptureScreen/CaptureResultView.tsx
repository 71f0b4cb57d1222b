import { useEffect, useState } from 'react';
import { ScrollView, StyleSheet, View } from 'react-native';
import { FigureCell } from '@/components/ui/Figure';
import { isKeyOfPage } from '@/components/ui/FindField';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { OneOf } from '@/components/ui/WordsToPress';
import { formatNumber, formatQuantity } from '@/lib/drawing/quantities';
import {
  causeWords,
  clockBeyondWords,
  measuredSymbolsWords,
  recipeWords,
  type MeasuredCapture,
  type NullPower,
} from '@/lib/synth';
import { ChannelPage } from './ChannelPage';
import { ConstellationPage } from './ConstellationPage';
import { InksPage } from './InksPage';
import { NullPowerView } from './NullPowerView';
import { percentOf, signedText, verdictOf } from './captureWords';
import type { ResultProps } from './resultProps';
import { SubcarriersPage } from './SubcarriersPage';
import { SymbolsPage } from './SymbolsPage';

type PageName = 'inks' | 'symbols' | 'subcarriers' | 'constellation' | 'channel';

const pages: { value: PageName; label: string }[] = [
  { value: 'inks', label: 'Inks' },
  { value: 'symbols', label: 'Symbols' },
  { value: 'subcarriers', label: 'Subcarriers' },
  { value: 'constellation', label: 'Constellation' },
  { value: 'channel', label: 'Channel' },
];

/** What a recognised capture says: the numeral with its recipe, then its pages; on a wide screen all of them. */
export function CaptureResultView({
  capture,
  content,
  readingWords,
  fileNulls,
  limitPercent,
}: ResultProps & { readingWords: string; fileNulls: NullPower | null }) {
  const phone = useBreakpoint() !== 'wide';
  const [page, setPage] = useState<PageName>('symbols');
  useArrows(page, setPage);
  const shared = { capture, content, limitPercent };
  const cause = causeWords(capture.found, readingWords);
  const part = measuredSymbolsWords(capture);
  const notices = (
    <>
      {cause ? <Notice kind="warning">{cause}</Notice> : null}
      {part ? <Notice kind="warning">{part}</Notice> : null}
      {capture.statistics.clippedSamples > 0 ? <Notice kind="warning">{clippedWords(capture)}</Notice> : null}
      {capture.isCut ? (
        <Notice>{`The first ${formatNumber(capture.symbols)} symbols were measured; the capture holds more.`}</Notice>
      ) : null}
      {capture.lostSubcarriers > 0 ? (
        <Notice kind="warning">{`${formatNumber(capture.lostSubcarriers)} subcarriers lie outside of the capture's band: there is no figure of them.`}</Notice>
      ) : null}
    </>
  );
  const nulls = <NullPowerView nulls={capture.nulls} file={fileNulls} />;
  if (!phone)
    return (
      <View style={styles.wide}>
        {notices}
        <Numerals capture={capture} limitPercent={limitPercent} />
        <View style={styles.columns}>
          <View style={styles.column}>
            <Titled title="Inks">
              <InksPage {...shared} />
            </Titled>
            <Titled title="Symbols">
              <SymbolsPage {...shared} />
            </Titled>
            {nulls}
            <OtherFigures capture={capture} />
          </View>
          <View style={styles.column}>
            <Titled title="Subcarriers">
              <SubcarriersPage {...shared} />
            </Titled>
            <Titled title="Channel">
              <ChannelPage {...shared} />
            </Titled>
            <Titled title="Constellation">
              <ConstellationPage {...shared} />
            </Titled>
          </View>
        </View>
      </View>
    );
  return (
    <View style={styles.stack}>
      {notices}
      <Numerals capture={capture} limitPercent={limitPercent} />
      <ScrollView horizontal showsHorizontalScrollIndicator={false} style={styles.pages}>
        <OneOf label="Page of the result" bare value={page} choices={pages} onChange={setPage} />
      </ScrollView>
      {page === 'inks' ? (
        <>
          <InksPage {...shared} />
          <OtherFigures capture={capture} />
        </>
      ) : null}
      {page === 'symbols' ? <SymbolsPage {...shared} /> : null}
      {page === 'subcarriers' ? <SubcarriersPage {...shared} /> : null}
      {page === 'constellation' ? <ConstellationPage {...shared} /> : null}
      {page === 'channel' ? <ChannelPage {...shared} /> : null}
      {nulls}
    </View>
  );
}

/** Left and right turn the pages where no field has the keyboard. */
function useArrows(page: PageName, setPage: (page: PageName) => void) {
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      const by = event.key === 'ArrowRight' ? 1 : event.key === 'ArrowLeft' ? -1 : 0;
      if (
        by === 0 ||
        !isKeyOfPage(event) ||
        (event.target as HTMLElement | null)?.closest('[role=radiogroup],[tabindex]')
      )
        return;
      const at = pages.findIndex(({ value }) => value === page);
      setPage(pages[(at + by + pages.length) % pages.length]!.value);
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  }, [page, setPage]);
}

/** EVM at 60 px with verdict and dB, how it was taken, and where the capture lies. */
function Numerals({ capture, limitPercent }: { capture: MeasuredCapture; limitPercent: number | null }) {
  const wide = useBreakpoint() === 'wide';
  const { all } = capture.evm;
  const verdict = verdictOf(all.ratio, limitPercent);
  const offset = formatQuantity(Math.abs(capture.offsetHz), 'Hz', 4);
  const delay = formatQuantity(Math.abs(capture.delaySec), 's', 4);
  const sign = (value: number) => (value < 0 ? '−' : '');
  return (
    <View style={[styles.block, wide ? styles.blockWide : null]}>
      <View style={wide ? styles.heroWide : styles.hero}>
        <View style={styles.heroHead}>
          <Text variant="body" weight={500} tone="strong">
            {capture.isOverData ? 'EVM of the data cells' : 'EVM of all known cells'}
          </Text>
          {verdict ? (
            <Text weight={600} tone={verdict.isMet ? 'success' : 'danger'}>
              {verdict.words}
            </Text>
          ) : null}
        </View>
        {all.ratio === null || all.db === null ? (
          <Text tone="quiet">Not measured: the fit leaves nothing of so few cells.</Text>
        ) : (
          <View style={styles.numeral}>
            <Text variant="figureHero" tone="strong" weight={600} style={styles.sixty}>
              {percentOf(all.ratio)}
              <Text variant="heading" weight={400} tone="quiet">
                {' %'}
              </Text>
            </Text>
            <Text variant="figure" tone="strong" style={styles.beside}>
              {formatNumber(all.db, 1, true)}
              <Text variant="small" tone="quiet">
                {' dB'}
              </Text>
            </Text>
          </View>
        )}
        <Text variant="small" tone="body" style={wide ? styles.recipeWide : null}>
          {recipeWords(capture)}
        </Text>
      </View>
      <View style={[styles.cells, wide ? styles.cellsWide : null]}>
        <FigureCell
          label="Frequency offset"
          value={signedText(capture.offsetHz < 0 ? -1 : 1, offset.value)}
          unit={offset.unit}
          style={styles.cell}
        />
        <FigureCell
          label="Delay"
          value={`${sign(capture.delaySec)}${delay.value}`}
          unit={delay.unit}
          style={styles.middle}
        />
        <FigureCell label="Level" value={formatNumber(capture.levelDbfs, 1, true)} unit="dBFS" style={styles.cell} />
      </View>
    </View>
  );
}

/** What the receiver itself did: SNR, clock, imbalance, DC, clipping; only what was seen. */
function OtherFigures({ capture }: { capture: MeasuredCapture }) {
  const { imbalance, statistics } = capture;
  const bound = (figure: { db: number; isBound: boolean } | null) =>
    figure === null ? 'not measured' : `${figure.isBound ? 'below ' : ''}${formatNumber(figure.db, 1, true)} dB`;
  const rows: [string, string][] = [
    [
      'SNR in the used cells, before equalizing',
      capture.snrDb === null ? 'not measured' : `${formatNumber(capture.snrDb, 1, true)} dB`,
    ],
    ['Clock against the vector', clockWords(capture)],
    ['Image, to the signal', bound(imbalance.image)],
    ...(imbalance.generatorImage
      ? ([["Generator's own image", bound(imbalance.generatorImage)]] as [string, string][])
      : []),
    ...(imbalance.gainDb === null
      ? []
      : ([
          [
            'I over Q, angle',
            `${formatNumber(imbalance.gainDb, 2, true)} dB, ${formatNumber(imbalance.angleDeg!, 2, true)}°`,
          ],
        ] as [string, string][])),
    ['DC, to the signal', bound(imbalance.dc)],
    ['Largest sample', `${formatNumber(capture.peakDbfs, 1, true)} dBFS`],
    [
      'Clipped',
      statistics.clippedSamples === 0
        ? 'nothing'
        : `${formatNumber((100 * statistics.clippedSamples) / statistics.samples, 3)} %`,
    ],
  ];
  return (
    <View>
      {rows.map(([name, value]) => (
        <View key={name} style={styles.row}>
          <Text variant="small" style={styles.grow}>
            {name}
          </Text>
          <Text variant="figureSmall" tone="strong">
            {value}
          </Text>
        </View>
      ))}
    </View>
  );
}

function clockWords({ clockRatio: [p, q], clockErrorPpm, clockErrorSigmaPpm, isClockShared }: MeasuredCapture): string {
  const ratio = p === q ? '' : `${p}/${q}, `;
  if (clockErrorPpm === null) return `${ratio}not measured`;
  const sigma =
    clockErrorSigmaPpm === null || !Number.isFinite(clockErrorSigmaPpm)
      ? null
      : formatNumber(3 * clockErrorSigmaPpm, 2);
  if (isClockShared) return `${ratio}no error seen${sigma === null ? '' : `, ± ${sigma} ppm`}`;
  const beyond = clockBeyondWords(clockErrorPpm);
  const error = `${ratio}${signedText(clockErrorPpm, formatNumber(Math.abs(clockErrorPpm), 2, true))} ppm`;
  return beyond === null ? error : `${error}, ${beyond}`;
}

function clippedWords({ statistics }: MeasuredCapture): string {
  const share = formatNumber((100 * statistics.clippedSamples) / statistics.samples, 3);
  return `${share} % of the samples stand at the receiver's limit: lower its input, or the figures hold its clipping too.`;
}

function Titled({ title, children }: { title: string; children: React.ReactNode }) {
  return (
    <View style={styles.titled}>
      <Text variant="heading" heading={2} tone="strong">
        {title}
      </Text>
      {children}
    </View>
  );
}

const styles = StyleSheet.create({
  stack: { gap: 10 },
  wide: { gap: 20 },
  columns: { flexDirection: 'row', alignItems: 'flex-start', gap: 48 },
  column: { flex: 1, minWidth: 0, gap: 24 },
  titled: { gap: 8 },
  block: { borderWidth: 1.5, borderColor: color.rule.strong, backgroundColor: color.surface.raised },
  hero: { padding: 14, paddingBottom: 10, gap: 4 },
  heroWide: { padding: 16, paddingHorizontal: 20, gap: 4, flex: 1, minWidth: 0 },
  heroHead: { flexDirection: 'row', justifyContent: 'space-between', gap: 12 },
  numeral: { flexDirection: 'row', alignItems: 'flex-end', justifyContent: 'space-between', gap: 12 },
  sixty: { fontSize: 60, lineHeight: 66, letterSpacing: -1.6 },
  beside: { paddingBottom: 12 },
  recipeWide: { maxWidth: 720 },
  cells: { flexDirection: 'row', borderTopWidth: 1, borderTopColor: color.rule.line },
  cellsWide: {
    width: 480,
    borderTopWidth: 0,
    borderLeftWidth: 1,
    borderLeftColor: color.rule.line,
    alignItems: 'center',
  },
  blockWide: { flexDirection: 'row' },
  cell: { flex: 1 },
  middle: { flex: 1, borderLeftWidth: 1, borderRightWidth: 1, borderColor: color.rule.line },
  pages: {
    marginHorizontal: -12,
    paddingHorizontal: 6,
    borderTopWidth: 1,
    borderBottomWidth: 1,
    borderColor: color.rule.line,
    backgroundColor: color.surface.sheet,
    flexGrow: 0,
  },
  row: { flexDirection: 'row', gap: 12, paddingVertical: 7, borderBottomWidth: 1, borderBottomColor: color.rule.hair },
  grow: { flexGrow: 1, flexShrink: 1 },
});
