import { NewBenchScreen } from '@/components/screens/BenchScreen/BenchScreen';

export default function Route() {
  return <NewBenchScreen />;
}
