import { MoreScreen } from '@/components/screens/MoreScreen';

export default function Route() {
  return <MoreScreen />;
}
