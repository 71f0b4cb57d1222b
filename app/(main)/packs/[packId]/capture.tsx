import { useLocalSearchParams } from 'expo-router';
import { CaptureScreen } from '@/components/screens/CaptureScreen/CaptureScreen';

export default function Route() {
  const { packId } = useLocalSearchParams<{ packId: string }>();
  return <CaptureScreen packId={packId} />;
}
