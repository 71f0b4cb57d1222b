import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import type { HeadlessSkia, Pixels } from './skia';

/** A channel may differ by so much before the pixel counts: rounding of anti-aliased edges. */
const CHANNEL_MOST = 24;

/**
 * How many pixels differ from the kept picture. With UPDATE_PICTURES=1 the picture is written in place of being compared: look at
 * it before it is committed.
 */
export function differingPixels(skia: HeadlessSkia, name: string, drawn: Pixels): number {
  const file = path.join('tests/fixtures/visual', `${name}.png`);
  if (process.env.UPDATE_PICTURES === '1') {
    mkdirSync(path.dirname(file), { recursive: true });
    writeFileSync(file, drawn.png);
    return 0;
  }
  if (!existsSync(file)) throw new Error(`${file} is missing`);
  const kept = skia.Image.MakeImageFromEncoded(skia.Data.fromBytes(new Uint8Array(readFileSync(file))))!;
  if (kept.width() !== drawn.width || kept.height() !== drawn.height) return drawn.width * drawn.height;
  const wanted = kept.readPixels() as Uint8Array;
  let count = 0;
  for (let at = 0; at < drawn.data.length; at += 4) {
    for (let channel = 0; channel < 4; channel++) {
      if (Math.abs(drawn.data[at + channel]! - wanted[at + channel]!) <= CHANNEL_MOST) continue;
      count++;
      break;
    }
  }
  return count;
}
