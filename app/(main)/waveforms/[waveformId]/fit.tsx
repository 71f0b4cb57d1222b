import { useLocalSearchParams } from 'expo-router';
import { FitScreen } from '@/components/screens/FitScreen/FitScreen';

export default function Route() {
  const { waveformId, revision } = useLocalSearchParams<{ waveformId: string; revision?: string }>();
  return <FitScreen key={waveformId} waveformId={waveformId} revisionId={revision ?? null} />;
}
