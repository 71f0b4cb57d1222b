import { useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { GridSheet } from '@/components/drawing/GridSheet';
import { useSpectrum } from '@/components/drawing/useSpectrum';
import { color } from '@/components/ui/theme';
import { paLadder } from '@/lib/document/demoDocuments';

/** Decoration, hidden from readers: the demo waveform's grid, straightedge and, where there is room, its spectrum. */
export function DemoDrawing({ compact = false }: { compact?: boolean }) {
  const [content] = useState(() => paLadder().content);
  const spectrum = useSpectrum(compact ? null : content);
  return compact ? (
    <View style={styles.frieze} aria-hidden>
      <GridSheet content={content} gridHeightPx={112} />
    </View>
  ) : (
    <View aria-hidden>
      <GridSheet content={content} gridHeightPx={470} spectrum={spectrum ?? []} spectrumHeightPx={210} />
    </View>
  );
}

const styles = StyleSheet.create({
  frieze: {
    paddingHorizontal: 12,
    paddingTop: 24,
    paddingBottom: 8,
    backgroundColor: color.surface.desk,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.line,
  },
});
