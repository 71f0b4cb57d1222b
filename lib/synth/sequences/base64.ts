import { demand } from '../errors';

const ALPHABET = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/';
const VALUES = new Int16Array(128).fill(-1);
for (let i = 0; i < 64; i++) VALUES[ALPHABET.charCodeAt(i)] = i;

/** The bytes of padded base64 text (RFC 4648 section 4), a new array. Throws SynthError `bad_content` for anything else. */
export function decodeBase64(text: string): Uint8Array {
  demand(text.length % 4 === 0, 'bad_content', 'Base64 comes in groups of four characters.');
  const padding = text.endsWith('==') ? 2 : text.endsWith('=') ? 1 : 0;
  const bytes = new Uint8Array((text.length / 4) * 3 - padding);
  const digits = text.length - padding;
  let held = 0;
  let at = 0;
  for (let i = 0; i < digits; i++) {
    const value = VALUES[text.charCodeAt(i)] ?? -1;
    demand(value >= 0, 'bad_content', 'A character is not base64.');
    held = ((held << 6) | value) & 0xffffff;
    const place = i & 3;
    if (place !== 0) bytes[at++] = (held >> (6 - 2 * place)) & 255;
  }
  return bytes;
}
