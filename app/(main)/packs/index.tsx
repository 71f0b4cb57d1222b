import { PacksScreen } from '@/components/screens/PacksScreen/PacksScreen';

export default function Route() {
  return <PacksScreen />;
}
