import { StyleSheet, View } from 'react-native';
import { FigureBlock } from '@/components/drawing/FigureBlock';
import { GridSheet } from '@/components/drawing/GridSheet';
import { TrayList } from '@/components/drawing/TrayList';
import { Text } from '@/components/ui/Text';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { contentFigures, reachSentences } from '../figureWords';
import type { Start } from './starts';

/** What a start holds: citation, grid, tray, figures, the pilots' reach and what is left out. */
export function StartSheet({ start }: { start: Start }) {
  const wide = useBreakpoint() === 'wide';
  const { content } = start.document;
  return (
    <View style={styles.sheet}>
      <Text variant="small" tone="quiet">
        {start.document.about.basedOn
          ? `After ${start.document.about.basedOn}. Every value can be changed.`
          : `${start.source}.`}
      </Text>
      {start.holds ? <Text>{start.holds}</Text> : null}
      <GridSheet
        content={content}
        gridHeightPx={wide ? 280 : 168}
        label={`Grid of ${content.fftSize} subcarriers and ${content.symbolCount} symbols`}
      />
      <TrayList content={content} />
      <FigureBlock figures={contentFigures(content)} columns={wide ? 4 : 2} />
      <View style={wide ? styles.pair : styles.stack}>
        <View style={styles.half}>
          <Text variant="bodyStrong" heading={2} tone="strong">
            Reach of the pilots
          </Text>
          {reachSentences(content).map((sentence) => (
            <Text key={sentence}>{sentence}</Text>
          ))}
        </View>
        {start.leftOut.length > 0 ? (
          <View style={styles.half}>
            <Text variant="bodyStrong" heading={2} tone="strong">
              What is left out
            </Text>
            {start.leftOut.map((line) => (
              <Text key={line}>{`${line[0]!.toUpperCase()}${line.slice(1)}.`}</Text>
            ))}
            {start.fromMemory ? (
              <Text tone="quiet">{`From memory, not compared with the text: ${start.fromMemory}.`}</Text>
            ) : null}
          </View>
        ) : null}
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  sheet: { gap: 14 },
  pair: { flexDirection: 'row', gap: 32 },
  stack: { gap: 16 },
  half: { flex: 1, gap: 4 },
});
