import { PeopleScreen } from '@/components/screens/TeamScreen/PeopleScreen';

export default function Route() {
  return <PeopleScreen />;
}
