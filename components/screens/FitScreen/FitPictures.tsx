import { StyleSheet, View } from 'react-native';
import { Text } from '@/components/ui/Text';
import type { Fit } from '@/lib/contracts/fit';
import { LengthRuler } from './LengthRuler';
import { SeamPicture } from './SeamPicture';

/** The file's length on a ruler of the granularity, and its last and first samples joined. */
export function FitPictures({ fit, withLength }: { fit: Fit; withLength: boolean }) {
  const find = (check: string) => fit.findings.find((finding) => finding.check === check);
  const length = find('granularity');
  const seam = find('seam');
  const hasWrap = find('mode')?.found === 'loop';
  return (
    <View style={styles.pictures}>
      {withLength && length && length.measured !== null && length.limit !== null ? (
        <View style={styles.picture}>
          <Text variant="small" weight={600} heading={3}>
            Length
          </Text>
          <LengthRuler samples={length.measured} granularity={length.limit} />
          {length.verdict === 'meets' ? (
            <Text variant="small" tone="quiet">
              {length.words}
            </Text>
          ) : null}
        </View>
      ) : null}
      {hasWrap && seam ? (
        <View style={styles.picture}>
          <Text variant="small" weight={600} heading={3}>
            Seam
          </Text>
          {fit.seam ? <SeamPicture seam={fit.seam} jumps={seam.verdict === 'misses'} /> : null}
          {seam.verdict === 'meets' ? (
            <Text variant="small" tone="quiet">
              {seam.words}
            </Text>
          ) : fit.seam ? (
            <Text variant="small" tone="quiet">
              {`Step at the wrap ${fit.seam.stepAtWrap.toFixed(2)} of the RMS, elsewhere ${fit.seam.stepElsewhere.toFixed(2)} at most.`}
            </Text>
          ) : null}
          {fit.seam ? null : (
            <Text variant="small" tone="quiet">
              {fit.levels === 'measuring'
                ? 'The samples around the wrap are drawn once they are measured.'
                : 'The samples around the wrap were not measured.'}
            </Text>
          )}
        </View>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({ pictures: { gap: 20 }, picture: { gap: 8 } });
