import { LinkScreen } from '@/components/screens/SignInScreen/LinkScreen';

export default function Route() {
  return <LinkScreen kind="reset" />;
}
