import { BenchesScreen } from '@/components/screens/BenchScreen/BenchesScreen';

export default function Route() {
  return <BenchesScreen />;
}
