import { QueryClientProvider } from '@tanstack/react-query';
import { useFonts } from 'expo-font';
import { Slot } from 'expo-router';
import { fontFiles } from '@/components/ui/fonts';
import { installThemeStyles } from '@/components/ui/theme';
import { ToastPlace } from '@/components/ui/toast';
import { queryClient } from '@/lib/client/queryClient';

installThemeStyles();

export default function RootLayout() {
  const [ready, failure] = useFonts(fontFiles);
  if (!ready && !failure) return null;
  return (
    <QueryClientProvider client={queryClient}>
      <Slot />
      <ToastPlace />
    </QueryClientProvider>
  );
}
