/** What a pack was made from: a revision that nobody released, or the number of an edition. */
export type PackState = 'draft' | number;

const digestDigits = 8;
const emptySlug = 'waveform';

function slugOf(title: string): string {
  return title
    .normalize('NFKD')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-|-$/g, '');
}

/**
 * The name that tells ten vectors in an instrument's memory apart: slug of the title, edition or draft, first digits of
 * the vector's SHA-256; [a-z0-9-], at most `mostCharacters`.
 */
export function baseNameOf(title: string, state: PackState, vectorSha256Hex: string, mostCharacters: number): string {
  const tail = `-${state === 'draft' ? 'draft' : `e${state}`}-${vectorSha256Hex.slice(0, digestDigits)}`;
  const slug = (slugOf(title) || emptySlug).slice(0, Math.max(1, mostCharacters - tail.length)).replace(/-$/, '');
  return slug + tail;
}
