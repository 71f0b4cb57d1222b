import { Slot } from 'expo-router';
import { SessionGate } from '@/components/screens/SessionGate';

export default function MainLayout() {
  return (
    <SessionGate>
      <Slot />
    </SessionGate>
  );
}
