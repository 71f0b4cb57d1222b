import { WaveformsScreen } from '@/components/screens/WaveformsScreen/WaveformsScreen';

export default function Route() {
  return <WaveformsScreen />;
}
