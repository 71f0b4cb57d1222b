import {
  AlphaType,
  ColorType,
  FontEdging,
  PaintStyle,
  Skia,
  StrokeCap,
  StrokeJoin,
  type SkColor,
  type SkFont,
  type SkImage,
  type SkPaint,
  type SkTypeface,
} from '@shopify/react-native-skia';
import type { FaceFiles, FaceName } from '../loadFaces';

/** A step of the drawing's small type scale. */
export type FontKey = 'axis' | 'raised' | 'axisStrong' | 'figure' | 'words' | 'wordsStrong';

const fonts: Record<FontKey, { face: FaceName; size: number }> = {
  axis: { face: 'ChivoMono_400Regular', size: 11 },
  raised: { face: 'ChivoMono_400Regular', size: 8 },
  axisStrong: { face: 'ChivoMono_600SemiBold', size: 11 },
  figure: { face: 'ChivoMono_500Medium', size: 11 },
  words: { face: 'HankenGrotesk_500Medium', size: 12 },
  wordsStrong: { face: 'HankenGrotesk_600SemiBold', size: 12 },
};

export interface StrokeOptions {
  cap?: 'butt' | 'round' | 'square';
  dash?: readonly number[];
  /** Upright columns on whole pixels: no smoothing, which would show as stripes and cost time. */
  crisp?: boolean;
}

/**
 * What lives as long as a canvas: paints, faces and small images, made once and freed together. Everything that a single
 * frame makes (pictures, tile images) is let go by its owner.
 */
export interface DrawScope {
  fill(color: string, opacity?: number): SkPaint;
  stroke(color: string, widthPx: number, options?: StrokeOptions): SkPaint;
  /** Null where the face could not be loaded: words are then left out. */
  font(key: FontKey): SkFont | null;
  textWidth(text: string, key: FontKey): number;
  /** A small picture kept under a name (mark sheets, the hatch). */
  image(name: string, make: () => SkImage | null): SkImage | null;
  /** A paint kept under a name, for shaders. */
  paint(name: string, make: () => SkPaint): SkPaint;
  dispose(): void;
}

const caps = { butt: StrokeCap.Butt, round: StrokeCap.Round, square: StrokeCap.Square };

export function createDrawScope(files: FaceFiles): DrawScope {
  const colors = new Map<string, SkColor>();
  const paints = new Map<string, SkPaint>();
  const images = new Map<string, SkImage | null>();
  const madeFonts = new Map<FontKey, SkFont | null>();
  const faces = new Map<FaceName, SkTypeface | null>();
  const widths = new Map<string, number>();

  function colorOf(color: string): SkColor {
    let known = colors.get(color);
    if (!known) colors.set(color, (known = Skia.Color(color)));
    return known;
  }

  function kept(name: string, make: () => SkPaint): SkPaint {
    let paint = paints.get(name);
    if (!paint) paints.set(name, (paint = make()));
    return paint;
  }

  function faceOf(name: FaceName): SkTypeface | null {
    if (!faces.has(name)) {
      const file = files[name];
      faces.set(name, file ? Skia.Typeface.MakeFreeTypeFaceFromData(Skia.Data.fromBytes(file)) : null);
    }
    return faces.get(name) ?? null;
  }

  function font(key: FontKey): SkFont | null {
    if (!madeFonts.has(key)) {
      const { face, size } = fonts[key];
      const typeface = faceOf(face);
      const made = typeface ? Skia.Font(typeface, size) : null;
      made?.setSubpixel(true);
      made?.setEdging(FontEdging.AntiAlias);
      madeFonts.set(key, made);
    }
    return madeFonts.get(key) ?? null;
  }

  return {
    fill: (color, opacity = 1) =>
      kept(`f ${color} ${opacity}`, () => {
        const paint = Skia.Paint();
        paint.setColor(colorOf(color));
        if (opacity < 1) paint.setAlphaf(opacity);
        paint.setAntiAlias(true);
        return paint;
      }),
    stroke: (color, widthPx, options = {}) =>
      kept(
        `s ${color} ${widthPx} ${options.cap ?? 'butt'} ${options.dash?.join() ?? ''} ${options.crisp ?? false}`,
        () => {
          const paint = Skia.Paint();
          paint.setStyle(PaintStyle.Stroke);
          paint.setColor(colorOf(color));
          paint.setStrokeWidth(widthPx);
          paint.setStrokeCap(caps[options.cap ?? 'butt']);
          paint.setStrokeJoin(StrokeJoin.Round);
          paint.setAntiAlias(!options.crisp);
          if (options.dash) paint.setPathEffect(Skia.PathEffect.MakeDash([...options.dash], 0));
          return paint;
        },
      ),
    font,
    textWidth(text, key) {
      const name = `${key} ${text}`;
      let width = widths.get(name);
      if (width === undefined) {
        width = font(key)?.getTextWidth(text) ?? 0;
        if (widths.size > 4000) widths.clear();
        widths.set(name, width);
      }
      return width;
    },
    image(name, make) {
      if (!images.has(name)) images.set(name, make());
      return images.get(name) ?? null;
    },
    paint: kept,
    dispose() {
      for (const paint of paints.values()) paint.dispose();
      for (const image of images.values()) image?.dispose();
      for (const made of madeFonts.values()) made?.dispose();
      for (const face of faces.values()) face?.dispose();
      paints.clear();
      images.clear();
      madeFonts.clear();
      faces.clear();
    },
  };
}

/** An image of RGBA pixels (straight alpha, rows without padding). The pixels are copied. */
export function imageOfPixels(pixels: Uint8Array, width: number, height: number): SkImage | null {
  const info = { width, height, alphaType: AlphaType.Unpremul, colorType: ColorType.RGBA_8888 };
  return Skia.Image.MakeImage(info, Skia.Data.fromBytes(pixels), width * 4);
}

/** "#rrggbb" as the bytes R, G, B, 255 in the order that a little-endian word stores them. */
export function pixelOf(color: string): number {
  const rgb = Number.parseInt(color.slice(1, 7), 16);
  return (0xff000000 | ((rgb & 0xff) << 16) | (rgb & 0xff00) | (rgb >>> 16)) >>> 0;
}
