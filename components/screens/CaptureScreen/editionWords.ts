import type { Pack } from '@/lib/contracts/packs';

/** "edition 4", or "this draft". */
export function editionWords(pack: Pick<Pack, 'editionNumber'>): string {
  return pack.editionNumber === null ? 'this draft' : `edition ${pack.editionNumber}`;
}

/** The same where there is little room: another waveform's edition is "that one". */
export function shortNameOf(other: Pack, pack: Pick<Pack, 'waveformId'>): string {
  if (other.waveformId !== pack.waveformId) return 'that one';
  return other.editionNumber === null ? `draft ${other.revisionNumber}` : `edition ${other.editionNumber}`;
}

/** "edition 3", with its waveform's title where it is another's. */
export function nameOf(other: Pack, pack: Pick<Pack, 'waveformId'>): string {
  const own =
    other.editionNumber === null ? `the draft of revision ${other.revisionNumber}` : `edition ${other.editionNumber}`;
  return other.waveformId === pack.waveformId ? own : `${own} of ${other.title}`;
}
