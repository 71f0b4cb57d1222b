import { useEffect, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { isKeyOfPage } from '@/components/ui/FindField';
import { Failing, Loading, NotThere } from '@/components/ui/states';
import { DigestChip } from '@/components/ui/DigestChip';
import { Notice } from '@/components/ui/Notice';
import { Stamp } from '@/components/ui/Stamp';
import { Text } from '@/components/ui/Text';
import { TextLink } from '@/components/ui/TextLink';
import { color } from '@/components/ui/theme';
import { useBreakpoint } from '@/components/ui/useBreakpoint';
import { useApi } from '@/lib/client/useApi';
import { useMay } from '@/lib/client/useSession';
import { showPack, type PackDetail } from '@/lib/contracts/packs';
import { Page } from '../Page';
import { clockTime } from '../when';
import { CautionsSheet, CautionStrip } from './Cautions';
import { CheckFile } from './CheckFile';
import { DeviceSheet, enteredWords } from './DeviceSheet';
import { DownloadPack } from './DownloadPack';
import { FilesSheet, FilesTable } from './Files';
import { LevelCardView } from './LevelCardView';
import { cardOfPack, cautionsOfPack } from './packCard';

/** The operator's page: which file, how it is set, what must not be exceeded, and the download. */
export function PackScreen({ packId }: { packId: string }) {
  // asked again within 60 s, so that an open page says when its edition was withdrawn
  const pack = useApi(showPack, { params: { packId } }, { refetchInterval: 30_000, refetchIntervalInBackground: true });
  if (pack.data) return <OpenPack key={packId} pack={pack.data} />;
  return (
    <Page title="Pack" backTo="/packs">
      {pack.isPending ? <Loading what="the pack" rows={3} rowHeight={120} /> : null}
      {pack.error?.problem?.code === 'not_found' ? <NotThere /> : null}
      {pack.error && pack.error.problem?.code !== 'not_found' ? (
        <Failing what={`The pack did not load. ${pack.error.message}`} onRetry={() => void pack.refetch()} />
      ) : null}
    </Page>
  );
}

function OpenPack({ pack }: { pack: PackDetail }) {
  const phone = useBreakpoint() === 'phone';
  const mayEnter = useMay('enterDeviceCards');
  const [sheet, setSheet] = useState<'files' | 'cautions' | 'device' | null>(null);
  const [typedDbm, setTyped] = useState<number | null>(null);
  const [cardId, setCardId] = useState<string | null>(null);
  const device = pack.deviceCards.find((one) => one.cardId === cardId) ?? null;
  const overrides = device
    ? {
        outputRmsDbm: device.intent.outputRmsDbm,
        lossDb: device.intent.lossDb,
        devicePeakLimitDbm: device.intent.devicePeakLimitDbm,
        deviceMeanLimitDbm: device.intent.deviceMeanLimitDbm,
        levelToleranceDb: device.intent.levelToleranceDb,
      }
    : {};
  const card = cardOfPack(pack, typedDbm === null ? overrides : { ...overrides, settingDbm: typedDbm });
  const points = cautionsOfPack(pack, card);
  const withdrawn = pack.state === 'withdrawn';
  const known = [
    { what: 'vector', digest: pack.vectorDigest },
    { what: 'whole pack', digest: pack.fileDigest },
    ...pack.files.map((file) => ({ what: file.name, digest: file.digest })),
  ];
  useDownloadKey();
  const hex = pack.vectorDigest.replace('sha256:', '');
  const download = withdrawn ? null : <DownloadPack pack={pack} phone={phone} />;
  const main = (
    <View style={phone ? styles.stack : styles.left}>
      {pack.state === 'draft' ? (
        <Notice kind="warning" title="Draft, not for the bench.">
          Nobody has released this revision.
        </Notice>
      ) : null}
      {withdrawn ? (
        <Notice kind="danger" title="Do not use this pack.">
          {`Edition ${pack.editionNumber} was withdrawn by ${pack.withdrawn?.by.name ?? 'a reviewer'}: ${pack.withdrawn?.reason ?? ''}`}
        </Notice>
      ) : null}
      <View style={styles.stampRow}>
        <Stamp state={pack.state} edition={pack.editionNumber} />
        <Text variant="small" tone="quiet" style={styles.shrink} numberOfLines={phone ? 1 : 2}>
          {`card fetched ${clockTime(pack.fetchedAtMs)}, ${pack.bench.name}`}
        </Text>
      </View>
      <View style={styles.digestRow}>
        <View>
          <Text variant="label" tone="quiet">
            Digest of the vector
          </Text>
          <Text variant="figure" tone="strong" selectable style={styles.digest}>
            {`${hex.slice(0, 4)} ${hex.slice(4, 8)} … ${hex.slice(-4)}`}
          </Text>
        </View>
        <CheckFile known={known} />
      </View>
      {withdrawn ? null : (
        <>
          <LevelCardView card={card} onSetting={setTyped} typed={typedDbm !== null} />
          <CautionStrip points={points} onAll={() => setSheet('cautions')} />
          {pack.notices.length > 0 ? (
            <Notice kind="warning" title="The fit says">
              <View>
                {pack.notices.map((words) => (
                  <Text key={words}>{words}</Text>
                ))}
              </View>
            </Notice>
          ) : null}
          {mayEnter ? (
            <View style={styles.deviceRow}>
              <Text variant="small" tone="quiet" style={styles.shrink}>
                {device ? `${device.deviceName}: ${enteredWords(device)}` : 'Limits as reviewed'}
              </Text>
              <Button kind="plain" onPress={() => setSheet('device')}>
                Another device
              </Button>
            </View>
          ) : null}
          <View style={styles.deviceRow}>
            <Text variant="small" tone="quiet" style={styles.shrink}>
              What came back from the device
            </Text>
            <TextLink href={{ pathname: '/packs/[packId]/capture', params: { packId: pack.packId } }}>
              Add a capture
            </TextLink>
          </View>
        </>
      )}
    </View>
  );
  return (
    <Page
      title={pack.title}
      backTo="/packs"
      bare
      headAside={
        <Button kind="plain" onPress={() => setSheet('files')}>
          Files
        </Button>
      }
      foot={phone && download ? <View style={styles.foot}>{download}</View> : undefined}
    >
      {phone ? (
        <View style={styles.phone}>{main}</View>
      ) : (
        <View style={styles.wide}>
          <View style={styles.head}>
            <Text variant="display" heading={1} tone="strong" style={styles.shrinkGrow}>
              {pack.title}
            </Text>
            <DigestChip digest={pack.fileDigest} />
            <View style={styles.headDownload}>{download}</View>
          </View>
          <View style={styles.columns}>
            {main}
            <FilesTable pack={pack} />
          </View>
        </View>
      )}
      {sheet === 'files' ? <FilesSheet pack={pack} onClose={() => setSheet(null)} /> : null}
      {sheet === 'cautions' ? <CautionsSheet points={points} onClose={() => setSheet(null)} /> : null}
      {sheet === 'device' ? (
        <DeviceSheet
          pack={pack}
          chosenId={cardId}
          onChoose={(id) => {
            setCardId(id);
            setTyped(null);
          }}
          onClose={() => setSheet(null)}
        />
      ) : null}
    </Page>
  );
}

/** `D` downloads, unless a field or a sheet has the keyboard. */
function useDownloadKey() {
  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.key.toLowerCase() !== 'd' || event.repeat || !isKeyOfPage(event)) return;
      document.getElementById('download-pack')?.click();
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  }, []);
}

const styles = StyleSheet.create({
  phone: { padding: 12, paddingTop: 8 },
  wide: { padding: 24, paddingHorizontal: 40, gap: 16, maxWidth: 1520, width: '100%', alignSelf: 'center' },
  head: { flexDirection: 'row', alignItems: 'center', gap: 16 },
  columns: { flexDirection: 'row', alignItems: 'flex-start', gap: 40 },
  stack: { gap: 8 },
  left: { width: 420, flexShrink: 0, gap: 12 },
  stampRow: { flexDirection: 'row', alignItems: 'center', gap: 10 },
  shrink: { flexShrink: 1 },
  shrinkGrow: { flexShrink: 1, flexGrow: 1 },
  digestRow: {
    flexDirection: 'row',
    alignItems: 'center',
    justifyContent: 'space-between',
    gap: 8,
    paddingTop: 6,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
  digest: { fontSize: 17, lineHeight: 22 },
  deviceRow: { flexDirection: 'row', alignItems: 'center', justifyContent: 'space-between', gap: 8 },
  foot: {
    padding: 10,
    paddingHorizontal: 12,
    backgroundColor: color.surface.trough,
    borderTopWidth: 1,
    borderTopColor: color.rule.line,
  },
  headDownload: { width: 220 },
});
