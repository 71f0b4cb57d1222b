import { AuditScreen } from '@/components/screens/TeamScreen/AuditScreen';

export default function Route() {
  return <AuditScreen />;
}
