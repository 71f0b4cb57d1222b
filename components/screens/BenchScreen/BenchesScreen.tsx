import { Link, useRouter } from 'expo-router';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Empty, Failing, Loading } from '@/components/ui/states';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { useApi } from '@/lib/client/useApi';
import { useMay } from '@/lib/client/useSession';
import { listBenches, type BenchItem } from '@/lib/contracts/benches';
import { formatNumber, formatQuantity } from '@/lib/drawing/quantities';
import { Page } from '../Page';
import { PrimaryStrip } from '../PrimaryStrip';
import { when } from '../when';

const containerWords = { raw: 'raw', wav: 'WAV', npy: 'npy', csv: 'CSV' } as const;

function layoutWords({ profile: { content } }: BenchItem): string {
  const word =
    content.word === 'float32'
      ? 'float'
      : content.word === 'int8'
        ? '8 bit'
        : `${content.bits} bit${content.bits < 16 ? `, ${content.align}-aligned` : ''}`;
  const order =
    content.word === 'int8' || content.container === 'csv'
      ? []
      : [content.byteOrder === 'little' ? 'low byte first' : 'high byte first'];
  return [
    word,
    ...(content.numberFormat === 'offsetBinary' ? ['offset binary'] : []),
    ...order,
    content.layout === 'split' ? 'I and Q in two files' : 'interleaved',
    containerWords[content.container],
    ...(content.swapIq ? ['I and Q swapped'] : []),
    ...(content.negateQ ? ['Q negated'] : []),
  ].join(', ');
}

function limitWords({ profile: { content } }: BenchItem): string {
  const least = formatQuantity(content.sampleClockHz.least, 'Hz');
  const most = formatQuantity(content.sampleClockHz.most, 'Hz');
  return `${least.value} ${least.unit} to ${most.value} ${most.unit}; ${formatNumber(content.leastSamples)} to ${formatNumber(content.mostSamples)} samples in steps of ${formatNumber(content.granularitySamples)}`;
}

/** The team's generators by their limits and layouts. */
export function BenchesScreen() {
  const router = useRouter();
  const phone = useBreakpoint() === 'phone';
  const mayWrite = useMay('writeBenches');
  const benches = useApi(listBenches, {});
  const add = mayWrite ? (
    <Button kind="filled" size={phone ? 'foot' : 'usual'} fill={phone} onPress={() => router.push('/benches/new')}>
      Add a bench
    </Button>
  ) : null;
  return (
    <Page title="Benches" backTo="/more" actions={add}>
      {benches.isPending ? <Loading what="bench profiles" /> : null}
      {benches.error && !benches.data ? (
        <Failing what={`The list did not load. ${benches.error.message}`} onRetry={() => void benches.refetch()} />
      ) : null}
      {benches.data?.items.length === 0 ? (
        <Empty action={phone ? null : add}>No bench profiles yet. Take the limits from the generator’s manual.</Empty>
      ) : null}
      {benches.data && benches.data.items.length > 0 ? (
        <View role="list" aria-label="Bench profiles" style={styles.list}>
          {benches.data.items.map((item) => (
            <View key={item.benchId} role="listitem">
              <Link href={{ pathname: '/benches/[benchId]', params: { benchId: item.benchId } }} style={styles.link}>
                <View style={styles.row}>
                  <Text variant="bodyStrong" tone="strong" numberOfLines={2}>
                    {item.name}
                  </Text>
                  <Text variant="small">{layoutWords(item)}</Text>
                  <Text variant="small" tone="quiet">
                    {limitWords(item)}
                  </Text>
                  <Text variant="small" tone="quiet">
                    {`version ${item.newest.version}, ${item.newest.savedBy.name}, ${when(item.newest.savedAtMs)}`}
                  </Text>
                </View>
              </Link>
            </View>
          ))}
        </View>
      ) : null}
      {phone && add ? <PrimaryStrip>{add}</PrimaryStrip> : null}
    </Page>
  );
}

const styles = StyleSheet.create({
  list: { borderWidth: 1, borderColor: color.rule.line, backgroundColor: color.surface.sheet },
  link: { textDecorationLine: 'none', display: 'flex', minWidth: 0 },
  row: { flex: 1, minWidth: 0, padding: 14, gap: 2, borderBottomWidth: 1, borderBottomColor: color.rule.hair },
});
