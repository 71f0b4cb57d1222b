import { StyleSheet, View } from 'react-native';
import { Text } from './Text';
import { color } from './theme';

/** Every page of a demo says so. */
export function DemoBand() {
  return (
    <View style={styles.band}>
      <Text variant="label" tone="warning">
        Demo: invented people and data
      </Text>
    </View>
  );
}

const styles = StyleSheet.create({
  band: {
    alignItems: 'center',
    backgroundColor: color.warning.wash,
    borderBottomWidth: 1,
    borderBottomColor: color.warning.rule,
    paddingVertical: 1,
  },
});
