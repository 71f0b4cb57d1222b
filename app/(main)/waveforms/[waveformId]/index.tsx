import { useLocalSearchParams } from 'expo-router';
import { DrawScreen } from '@/components/screens/DrawScreen/DrawScreen';

export default function Route() {
  const { waveformId } = useLocalSearchParams<{ waveformId: string }>();
  return <DrawScreen key={waveformId} waveformId={waveformId} />;
}
