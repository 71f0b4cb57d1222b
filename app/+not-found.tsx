import { View } from 'react-native';
import { DemoBand } from '@/components/ui/DemoBand';
import { useDocumentTitle } from '@/components/ui/Frame';
import { NotThere } from '@/components/ui/states';
import { color } from '@/components/ui/theme';
import { useSession } from '@/lib/client/useSession';

export default function NotFound() {
  useDocumentTitle('Nothing here');
  const { data } = useSession();
  return (
    <View role="main" style={{ flex: 1, backgroundColor: color.surface.desk }}>
      {data?.installation.isDemo ? <DemoBand /> : null}
      <NotThere alone />
    </View>
  );
}
