import { useLocalSearchParams } from 'expo-router';
import { ReviewScreen } from '@/components/screens/ReviewScreen/ReviewScreen';

export default function Route() {
  const { waveformId } = useLocalSearchParams<{ waveformId: string }>();
  return <ReviewScreen key={waveformId} waveformId={waveformId} />;
}
