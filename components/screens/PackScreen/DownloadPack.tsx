import { useEffect, useMemo } from 'react';
import { StyleSheet, View } from 'react-native';
import { useStore } from 'zustand';
import { Button } from '@/components/ui/Button';
import { Notice } from '@/components/ui/Notice';
import { Progress } from '@/components/ui/Progress';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { showToast } from '@/components/ui/toast';
import { addressOf } from '@/lib/client/apiClient';
import { createFileDownload, type DownloadState } from '@/lib/client/fileDownload';
import { downloadPack, type PackDetail } from '@/lib/contracts/packs';
import { formatNumber } from '@/lib/drawing/quantities';

/** Larger ones are the browser's own affair: it writes them to disk as they come. */
const FETCHED_BYTES_MOST = 2 ** 30;

function saveAs(file: Blob, name: string): void {
  const link = document.createElement('a');
  link.href = URL.createObjectURL(file);
  link.download = name;
  link.click();
  setTimeout(() => URL.revokeObjectURL(link.href), 60_000);
}

function useDownload(pack: PackDetail) {
  const { packId, fileName, fileBytes, fileDigest } = pack;
  const address = addressOf(downloadPack, { params: { packId } });
  const download = useMemo(
    () =>
      createFileDownload({
        address,
        bytes: fileBytes,
        sha256: fileDigest.replace('sha256:', ''),
        save(file) {
          saveAs(file, fileName);
          showToast('Downloaded, and it is the same file.');
        },
      }),
    [address, fileBytes, fileDigest, fileName],
  );
  useEffect(() => () => download.cancel(), [download]);
  return { download, address, state: useStore(download.state) };
}

const percent = (doneRatio: number) => `${formatNumber(Math.floor(100 * doneRatio))} %`;

/** The download: fetched here, so that the page can say where it stopped, go on, and compare the whole with its digest. */
export function DownloadPack({ pack, phone }: { pack: PackDetail; phone: boolean }) {
  const { download, address, state } = useDownload(pack);
  if (state.kind === 'running')
    return (
      <View style={styles.running}>
        <View style={styles.row}>
          <Text style={styles.grow} role="status">{`Downloading ${percent(state.doneRatio)}`}</Text>
          <Button size={phone ? 'foot' : 'usual'} onPress={download.cancel}>
            Cancel
          </Button>
        </View>
        <Progress label="Downloading the pack" doneRatio={state.doneRatio} />
      </View>
    );
  return (
    <View style={styles.stack}>
      <Trouble state={state} />
      {state.kind === 'stopped' ? (
        <View style={styles.row}>
          <Button onPress={download.cancel} size={phone ? 'foot' : 'usual'}>
            Leave it
          </Button>
          <Button kind="filled" fill size={phone ? 'foot' : 'usual'} onPress={() => void download.start()}>
            Go on
          </Button>
        </View>
      ) : (
        <a
          href={address}
          download={pack.fileName}
          onClick={(event) => {
            if (pack.fileBytes > FETCHED_BYTES_MOST) return;
            event.preventDefault();
            void download.start();
          }}
          style={{ textDecoration: 'none', flexGrow: 1, display: 'block' }}
          data-testid="download"
          id="download-pack"
        >
          <View style={[styles.download, phone ? styles.downloadPhone : null]}>
            <Text variant={phone ? 'heading' : 'bodyStrong'} tone="onSolid">
              Download pack
            </Text>
          </View>
        </a>
      )}
    </View>
  );
}

function Trouble({ state }: { state: DownloadState }) {
  switch (state.kind) {
    case 'stopped':
      return <Notice kind="warning">{`The file stopped at ${percent(state.doneRatio)}.`}</Notice>;
    case 'refused':
      return <Notice kind="danger">{state.words}</Notice>;
    case 'different':
      return <Notice kind="danger">Not the same file. Do not use it. Nothing was kept.</Notice>;
    default:
      return null;
  }
}

const styles = StyleSheet.create({
  stack: { gap: 8, flexGrow: 1 },
  running: { gap: 6, flexGrow: 1, minHeight: 48, justifyContent: 'center' },
  row: { flexDirection: 'row', alignItems: 'center', gap: 10 },
  grow: { flexGrow: 1, flexShrink: 1 },
  download: {
    height: 36,
    borderRadius: 3,
    alignItems: 'center',
    justifyContent: 'center',
    backgroundColor: color.accent.solid,
  },
  downloadPhone: { height: 48 },
});
