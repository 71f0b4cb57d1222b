import { StyleSheet, View } from 'react-native';
import { Button } from '@/components/ui/Button';
import { copyAndSay } from '@/components/ui/copyText';
import { Notice } from '@/components/ui/Notice';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import type { ShownLink } from '@/lib/contracts/people';
import { when } from '../when';

/** A one-time link, shown once: hand it over by a way you trust. */
export function ShownLinkBox({ link }: { link: ShownLink }) {
  return (
    <Notice kind="warning" title="Copy it now. It is not shown again.">
      <View style={styles.box}>
        <Text variant="figureSmall" selectable style={styles.url}>
          {link.url}
        </Text>
        <Text variant="small">{`Works once, until ${when(link.expiresAtMs)}. Hand it over by a way you trust.`}</Text>
        <Button onPress={() => void copyAndSay(link.url, 'Link copied')}>Copy the link</Button>
      </View>
    </Notice>
  );
}

const styles = StyleSheet.create({
  box: { gap: 8 },
  url: { wordBreak: 'break-all', padding: 8, backgroundColor: color.surface.sunken } as object,
});
