import { useLocalSearchParams } from 'expo-router';
import { PackScreen } from '@/components/screens/PackScreen/PackScreen';

export default function Route() {
  const { packId } = useLocalSearchParams<{ packId: string }>();
  return <PackScreen packId={packId} />;
}
