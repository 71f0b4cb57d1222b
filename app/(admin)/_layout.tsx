import { Slot } from 'expo-router';
import { SessionGate } from '@/components/screens/SessionGate';

export default function AdminLayout() {
  return (
    <SessionGate>
      <Slot />
    </SessionGate>
  );
}
