import { useFonts } from 'expo-font';
import { Slot } from 'expo-router';
import { fontFiles } from '@/components/ui/fonts';
import { installThemeStyles } from '@/components/ui/theme';
import { ToastPlace } from '@/components/ui/toast';

installThemeStyles();

export default function RootLayout() {
  const [ready, failure] = useFonts(fontFiles);
  if (!ready && !failure) return null;
  return (
    <>
      <Slot />
      <ToastPlace />
    </>
  );
}
