import { useLocalSearchParams } from 'expo-router';
import { BenchScreen } from '@/components/screens/BenchScreen/BenchScreen';

export default function Route() {
  const { benchId } = useLocalSearchParams<{ benchId: string }>();
  return <BenchScreen key={benchId} benchId={benchId} />;
}
