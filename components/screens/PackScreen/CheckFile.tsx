import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex } from '@noble/hashes/utils.js';
import { useRef, useState } from 'react';
import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { formatNumber } from '@/lib/drawing/quantities';

type Outcome =
  | { kind: 'none' }
  | { kind: 'reading'; ratio: number }
  | { kind: 'same'; name: string; what: string }
  | { kind: 'different'; name: string }
  | { kind: 'failed'; words: string };

const chunkBytes = 4 << 20;

/** Hashes a chosen file in slices, here on the device; answers null when it was cancelled. */
async function digestOfFile(
  file: File,
  onProgress: (ratio: number) => void,
  isCancelled: () => boolean,
): Promise<string | null> {
  const hash = sha256.create();
  for (let at = 0; at < file.size; at += chunkBytes) {
    if (isCancelled()) return null;
    hash.update(new Uint8Array(await file.slice(at, at + chunkBytes).arrayBuffer()));
    onProgress(Math.min(1, (at + chunkBytes) / file.size));
    await new Promise((resolve) => setTimeout(resolve, 0));
  }
  return bytesToHex(hash.digest());
}

/** Is the file in the generator's memory the one that was released? Works without a connection. */
export function CheckFile({ known }: { known: readonly { what: string; digest: string }[] }) {
  const input = useRef<HTMLInputElement>(null);
  const cancelled = useRef(false);
  const [outcome, setOutcome] = useState<Outcome>({ kind: 'none' });
  const check = async (file: File | undefined) => {
    if (!file) return;
    cancelled.current = false;
    setOutcome({ kind: 'reading', ratio: 0 });
    try {
      const digest = await digestOfFile(
        file,
        (ratio) => setOutcome({ kind: 'reading', ratio }),
        () => cancelled.current,
      );
      if (digest === null) return setOutcome({ kind: 'none' });
      const match = known.find((one) => one.digest.replace('sha256:', '') === digest);
      setOutcome(match ? { kind: 'same', name: file.name, what: match.what } : { kind: 'different', name: file.name });
    } catch {
      setOutcome({ kind: 'failed', words: 'The file could not be read.' });
    }
  };
  return (
    <View style={styles.place}>
      {outcome.kind === 'reading' ? (
        <View style={styles.row}>
          <View
            role="progressbar"
            aria-valuenow={Math.round(outcome.ratio * 100)}
            aria-label="Reading the file"
            style={styles.bar}
          >
            <View style={[styles.done, { width: `${outcome.ratio * 100}%` }]} />
          </View>
          <Button onPress={() => (cancelled.current = true)}>Cancel</Button>
        </View>
      ) : (
        <Button onPress={() => input.current?.click()}>Check a file</Button>
      )}
      <View role="status" aria-live="polite">
        {outcome.kind === 'reading' ? (
          <Text variant="small">{`Reading ${formatNumber(100 * outcome.ratio)} %`}</Text>
        ) : null}
        {outcome.kind === 'same' ? (
          <Text variant="bodyStrong" tone="success">
            {`Same file. ${outcome.name} is the ${outcome.what}.`}
          </Text>
        ) : null}
        {outcome.kind === 'different' ? (
          <Text variant="bodyStrong" tone="danger">
            {`Not the same file. Do not use it. (${outcome.name})`}
          </Text>
        ) : null}
        {outcome.kind === 'failed' ? <Text tone="danger">{outcome.words}</Text> : null}
      </View>
      <input
        ref={input}
        type="file"
        aria-label="File to check"
        style={{ display: 'none' }}
        onChange={(event) => {
          void check(event.target.files?.[0]);
          event.target.value = '';
        }}
      />
    </View>
  );
}

const styles = StyleSheet.create({
  place: { gap: 4, alignItems: 'flex-end', flexShrink: 1 },
  row: { flexDirection: 'row', alignItems: 'center', gap: 10 },
  bar: { width: 96, height: 4, backgroundColor: color.surface.sunken },
  done: { height: 4, backgroundColor: color.ink.strong },
});
