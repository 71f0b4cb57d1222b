import { LoadSkiaWeb } from '@shopify/react-native-skia/lib/module/web';

/** Fetches the drawing engine from our own origin, once, and only for screens that draw. */
export const loadSkia = () => LoadSkiaWeb({ locateFile: (file: string) => `/${file}` });
