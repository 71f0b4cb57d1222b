import { StartScreen } from '@/components/screens/StartScreen/StartScreen';

export default function Route() {
  return <StartScreen />;
}
