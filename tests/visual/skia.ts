import { readFileSync } from 'node:fs';
import CanvasKitInit from 'canvaskit-wasm/bin/full/canvaskit';
import { JsiSkApi } from '@shopify/react-native-skia/lib/commonjs/skia/web';
import type { Skia, SkCanvas } from '@shopify/react-native-skia';
import type { FaceFiles } from '@/components/canvas/loadFaces';

export type HeadlessSkia = typeof Skia;

/**
 * The drawing engine without a screen: Skia.Surface.Make(w, h) is a software raster. A test gives it to the draw functions by
 * mocking the package with this and its own enums.
 */
export async function loadHeadlessSkia(): Promise<HeadlessSkia> {
  const canvasKit = await CanvasKitInit({
    locateFile: (file: string) => `node_modules/canvaskit-wasm/bin/full/${file}`,
  });
  (globalThis as { CanvasKit?: unknown }).CanvasKit = canvasKit;
  return JsiSkApi(canvasKit) as unknown as HeadlessSkia;
}

const FACES = [
  'HankenGrotesk_500Medium',
  'HankenGrotesk_600SemiBold',
  'ChivoMono_400Regular',
  'ChivoMono_500Medium',
  'ChivoMono_600SemiBold',
];

/** The product's own faces from their files. */
export function readFaces(): FaceFiles {
  return Object.fromEntries(FACES.map((name) => [name, new Uint8Array(readFileSync(`assets/fonts/${name}.ttf`))]));
}

export interface Pixels {
  width: number;
  height: number;
  /** RGBA rows. */
  data: Uint8Array;
  png: Uint8Array;
}

/** Draws on a raster of this size and hands back what was drawn. */
export function drawn(skia: HeadlessSkia, width: number, height: number, draw: (canvas: SkCanvas) => void): Pixels {
  const surface = skia.Surface.Make(width, height)!;
  draw(surface.getCanvas());
  const image = surface.makeImageSnapshot();
  const data = image.readPixels() as Uint8Array;
  return { width, height, data: new Uint8Array(data), png: image.encodeToBytes() };
}

export function pixelAt({ data, width }: Pixels, x: number, y: number): string {
  const at = (y * width + x) * 4;
  return `#${[0, 1, 2].map((i) => data[at + i]!.toString(16).padStart(2, '0')).join('')}`.toUpperCase();
}
