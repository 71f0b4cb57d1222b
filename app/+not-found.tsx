import { View } from 'react-native';
import { NotThere } from '@/components/ui/states';
import { useDocumentTitle } from '@/components/ui/Frame';
import { color } from '@/components/ui/theme';

export default function NotFound() {
  useDocumentTitle('Nothing here');
  return (
    <View role="main" style={{ flex: 1, backgroundColor: color.surface.desk }}>
      <NotThere alone />
    </View>
  );
}
