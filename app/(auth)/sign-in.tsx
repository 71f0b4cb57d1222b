import { SignInScreen } from '@/components/screens/SignInScreen/SignInScreen';

export default function Route() {
  return <SignInScreen />;
}
