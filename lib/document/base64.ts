const alphabet = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/';
const equals = 61;

const valueOf = new Uint8Array(128).fill(255);
for (let at = 0; at < 64; at += 1) valueOf[alphabet.charCodeAt(at)] = at;

/**
 * What keeps a text from being the one RFC 4648 §4 spelling of so many bits (most significant first, padded, unused bits 0),
 * or null. Told by a loop over codes: a regular expression over 1.4 MB would recurse in some engines.
 */
export function base64Problem(text: string, bitCount: number): string | null {
  const byteCount = Math.ceil(bitCount / 8);
  const padding = (3 - (byteCount % 3)) % 3;
  const length = 4 * Math.ceil(byteCount / 3);
  if (text.length !== length) {
    return `must have ${length} characters for ${bitCount} bits, padding included, not ${text.length}`;
  }
  for (let at = 0; at < length; at += 1) {
    const code = text.charCodeAt(at);
    const isPadding = at >= length - padding;
    if (isPadding ? code !== equals : code > 127 || valueOf[code] === 255) {
      return `has a wrong character at place ${at + 1} (RFC 4648 §4 with padding)`;
    }
  }
  const significantBits = bitCount - 6 * (length - padding - 1);
  // The last characters may hold unused bits: those of a byte that is not full and those of base64 itself.
  for (let at = length - padding - 1, used = significantBits; at >= 0; at -= 1, used += 6) {
    const unused = 6 - Math.max(0, used);
    if (unused <= 0) break;
    if ((valueOf[text.charCodeAt(at)]! & (2 ** unused - 1)) !== 0) return 'must have its unused last bits 0';
  }
  return null;
}

/** Bytes to RFC 4648 §4 text with padding. */
export function encodeBase64(bytes: Uint8Array): string {
  const parts: string[] = [];
  let part = '';
  for (let at = 0; at < bytes.length; at += 3) {
    const rest = bytes.length - at;
    const word = (bytes[at]! << 16) | ((bytes[at + 1] ?? 0) << 8) | (bytes[at + 2] ?? 0);
    part += alphabet[word >> 18]! + alphabet[(word >> 12) & 63]!;
    part += (rest > 1 ? alphabet[(word >> 6) & 63]! : '=') + (rest > 2 ? alphabet[word & 63]! : '=');
    if (part.length >= 8192) {
      parts.push(part);
      part = '';
    }
  }
  return parts.join('') + part;
}
