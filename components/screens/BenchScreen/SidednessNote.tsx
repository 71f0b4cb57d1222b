import { StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';
import { addressOf } from '@/lib/client/apiClient';
import { downloadSidedness } from '@/lib/contracts/benches';
import { sidednessOf } from '@/lib/document/sidedness';
import type { BenchProfile } from '@/lib/synth';

/** One tone above the carrier in the profile's layout: whether I and Q are the generator's is seen on an analyser. */
export function SidednessNote({
  benchId,
  version,
  profile,
  changed,
}: {
  benchId: string;
  version: number;
  profile: BenchProfile;
  changed: boolean;
}) {
  const made = sidednessOf(profile);
  return (
    <View style={styles.sheet}>
      <Text variant="heading" heading={2} tone="strong">
        Which side of the carrier?
      </Text>
      <Text variant="small">{made.ok ? made.value.words : made.issue.message}</Text>
      {made.ok ? (
        <a
          href={addressOf(downloadSidedness, { params: { benchId }, query: { version } })}
          download
          style={{ textDecoration: 'none', display: 'block', width: 'fit-content' }}
        >
          <View style={styles.button}>
            <Text weight={600} tone="strong">
              Download sidedness pack
            </Text>
          </View>
        </a>
      ) : null}
      {made.ok && changed ? (
        <Text variant="small" tone="quiet">
          {`Of version ${version}, without the changes that are not saved yet.`}
        </Text>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  sheet: {
    gap: 8,
    padding: 16,
    borderWidth: 1,
    borderColor: color.rule.line,
    backgroundColor: color.surface.sheet,
  },
  button: {
    minHeight: 44,
    paddingHorizontal: 16,
    alignItems: 'center',
    justifyContent: 'center',
    borderWidth: 1,
    borderColor: color.rule.control,
    borderRadius: 3,
    backgroundColor: color.surface.raised,
  },
});
