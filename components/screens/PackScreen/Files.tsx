import { StyleSheet, View } from 'react-native';
import { DigestChip } from '@/components/ui/DigestChip';
import { FigureRow } from '@/components/ui/Figure';
import { Sheet } from '@/components/ui/overlay';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import type { PackDetail } from '@/lib/contracts/packs';
import { formatInteger, formatNumber, formatQuantity } from '@/lib/drawing/quantities';
import { when } from '../when';

const roleWords: Record<string, string> = {
  vector: 'the vector',
  meta: 'SigMF metadata',
  markers: 'markers',
  payload: 'payload bits',
  reference: 'reference symbols',
  cells: 'cells',
  document: 'the document',
  bench: 'the bench profile',
  card: 'level card',
  readme: 'how to read it',
};

/** Figures and entries of a pack with their digests. */
export function FilesTable({ pack }: { pack: PackDetail }) {
  const clock = formatQuantity(pack.sampleClockHz, 'Hz');
  return (
    <View style={styles.table}>
      <Text variant="heading" heading={2} tone="strong">
        Read back
      </Text>
      <View>
        <FigureRow
          name="EVM found in the file"
          value={pack.evmDb === null ? 'none' : formatNumber(pack.evmDb, 1, true)}
          {...(pack.evmDb === null ? {} : { unit: 'dB' })}
        />
        <FigureRow name="Samples" value={formatInteger(pack.samples)} />
        <FigureRow name="Sample clock" value={clock.value} unit={clock.unit} />
        <FigureRow
          name="Peak between samples"
          value={
            pack.levels.reconstructedPeakDbfs === null
              ? 'none'
              : formatNumber(pack.levels.reconstructedPeakDbfs, 2, true)
          }
          {...(pack.levels.reconstructedPeakDbfs === null ? {} : { unit: 'dBFS' })}
        />
        <FigureRow
          name="Mean while the frame plays"
          value={pack.levels.activeRmsDbfs === null ? 'none' : formatNumber(pack.levels.activeRmsDbfs, 2, true)}
          {...(pack.levels.activeRmsDbfs === null ? {} : { unit: 'dBFS' })}
        />
        <FigureRow name="Components that saturate" value={formatInteger(pack.levels.saturatedComponents ?? 0)} />
      </View>
      <Text variant="heading" heading={2} tone="strong">
        {`Files, ${pack.files.length}`}
      </Text>
      <View role="list" aria-label="Files">
        {pack.files.map((file) => {
          const size = formatQuantity(file.bytes, 'B', 3);
          return (
            <View key={file.name} role="listitem" style={styles.file}>
              <View style={styles.name}>
                <Text variant="figureSmall" numberOfLines={1}>
                  {file.name}
                </Text>
                <Text variant="small" tone="quiet">
                  {`${roleWords[file.role] ?? file.role}, ${size.value} ${size.unit}`}
                </Text>
              </View>
              <DigestChip digest={file.digest} />
            </View>
          );
        })}
      </View>
      <Text variant="small" tone="quiet">
        {`${pack.fileName}, made by ${pack.madeBy.name}, ${when(pack.madeAtMs)}, for ${pack.bench.name}, version ${pack.bench.version}.`}
      </Text>
    </View>
  );
}

export function FilesSheet({ pack, onClose }: { pack: PackDetail; onClose: () => void }) {
  return (
    <Sheet title="Files" onClose={onClose}>
      <FilesTable pack={pack} />
    </Sheet>
  );
}

const styles = StyleSheet.create({
  table: { flexGrow: 1, flexShrink: 1, minWidth: 0, gap: 10 },
  file: {
    minHeight: 52,
    flexDirection: 'row',
    alignItems: 'center',
    gap: 10,
    borderBottomWidth: 1,
    borderBottomColor: color.rule.hair,
    paddingVertical: 6,
  },
  name: { flexGrow: 1, flexShrink: 1, minWidth: 0 },
});
