/** A title as a part of a file name: [a-z0-9-], at most `most` characters, never empty. */
export function slugOf(title: string, most: number): string {
  const slug = title
    .normalize('NFKD')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-/, '')
    .slice(0, most)
    .replace(/-$/, '');
  return slug === '' ? 'waveform'.slice(0, most) : slug;
}

export interface BaseNameParts {
  title: string;
  /** null: a draft. */
  edition: number | null;
  /** Hexadecimal, of the vector's bytes. */
  vectorSha256: string;
  /** The profile's `fileName.most`: characters without extension and endings. */
  most: number;
}

/** The base name of a pack's files, told apart from its like by edition and digest even where the title is cut. */
export function baseName({ title, edition, vectorSha256, most }: BaseNameParts): string {
  const ending = `${edition === null ? 'draft' : `e${edition}`}-${vectorSha256.slice(0, 8)}`;
  const room = most - ending.length - 1;
  return room < 1 ? ending : `${slugOf(title, room)}-${ending}`;
}
