import { View } from 'react-native';
import { NotThere } from '@/components/ui/states';
import { color } from '@/components/ui/theme';

export default function NotFound() {
  return (
    <View style={{ flex: 1, backgroundColor: color.surface.desk }}>
      <NotThere />
    </View>
  );
}
