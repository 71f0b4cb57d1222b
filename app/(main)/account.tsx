import { AccountScreen } from '@/components/screens/AccountScreen/AccountScreen';

export default function Route() {
  return <AccountScreen />;
}
