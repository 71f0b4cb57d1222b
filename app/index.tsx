import { StyleSheet, View } from 'react-native';
import { Mark } from '@/components/ui/Mark';
import { Text } from '@/components/ui/Text';
import { color } from '@/components/ui/theme';

export default function Index() {
  return (
    <View style={styles.page}>
      <Mark size={52} label="Combwright" />
      <Text variant="display" heading={1} tone="strong">
        Combwright
      </Text>
      <Text tone="quiet">Draw the signal. Prove the file.</Text>
    </View>
  );
}

const styles = StyleSheet.create({
  page: { flex: 1, alignItems: 'center', justifyContent: 'center', gap: 12, backgroundColor: color.surface.desk },
});
