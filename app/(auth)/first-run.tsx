import { FirstRunScreen } from '@/components/screens/SignInScreen/FirstRunScreen';

export default function Route() {
  return <FirstRunScreen />;
}
