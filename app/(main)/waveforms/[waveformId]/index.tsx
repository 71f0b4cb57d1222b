import { useLocalSearchParams } from 'expo-router';
import { DrawScreen } from '@/components/screens/DrawScreen/DrawScreen';

export default function Route() {
  const { waveformId, revision } = useLocalSearchParams<{ waveformId: string; revision?: string }>();
  return <DrawScreen key={`${waveformId} ${revision ?? ''}`} waveformId={waveformId} revisionId={revision ?? null} />;
}
