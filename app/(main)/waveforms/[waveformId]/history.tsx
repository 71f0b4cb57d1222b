import { useLocalSearchParams } from 'expo-router';
import { HistoryScreen } from '@/components/screens/HistoryScreen/HistoryScreen';

export default function Route() {
  const { waveformId } = useLocalSearchParams<{ waveformId: string }>();
  return <HistoryScreen key={waveformId} waveformId={waveformId} />;
}
