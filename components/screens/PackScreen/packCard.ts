import { cautions, levelCard, type CardOverrides, type Caution, type LevelCard } from '@/lib/synth';
import type { PackDetail } from '@/lib/contracts/packs';
import { clockTime } from '../when';

/** The card of a pack with what was typed on the page or entered for another device, by the rule of the pack's own card. */
export function cardOfPack(pack: PackDetail, overrides: CardOverrides): LevelCard {
  // the card's clock is the pack's: the numbers it was made of are not needed here
  const document = {
    content: { fftSize: 1, oversampling: 1, subcarrierSpacingHz: [1, 1] as [number, number] },
    intent: pack.intent,
  };
  const card = levelCard(document, { content: pack.benchProfile.content }, pack.levels, overrides);
  return { ...card, sampleClockHz: pack.sampleClockHz };
}

export function cautionsOfPack(pack: PackDetail, card: LevelCard): Caution[] {
  return cautions(card, {
    state: pack.state,
    edition: pack.editionNumber,
    digest: pack.vectorDigest.replace('sha256:', ''),
    fetched: clockTime(pack.fetchedAtMs),
  });
}
