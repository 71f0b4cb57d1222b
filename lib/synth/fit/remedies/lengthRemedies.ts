import { fileSamples } from '../../numerology';
import { allowedLength, isLoadable, PAD_MOST, REPEATS_MOST, SAMPLES_MOST, usableMost } from '../limits';
import { applyChanges } from '../changes';
import { loopClosing } from '../closing';
import { counted, spell, spellHz } from '../words';
import { oversamplingDrafts } from './clockRemedies';
import {
  change,
  lengthWords,
  repeatLabel,
  samplesOfRepeat,
  silenceWords,
  withRepeats,
  type Alternatives,
  type Case,
  type Draft,
} from './draft';

/** How many lengths of one kind are tried: the nearest may break another limit that the next keeps. */
const TRIES = 4;

/** For a length that is no multiple of the granularity, or too short. */
export function lengthRemedies(about: Case): Alternatives[] {
  return [
    moreRepeats(about),
    fewerRepeats(about, false),
    oversamplingDrafts(about, 'length'),
    longerGap(about),
    longerPad(about),
    repeatsAndPad(about),
  ].map((drafts) => orWithOffset(about, drafts));
}

/** For a file that the memory does not hold. */
export function memoryRemedies(about: Case): Alternatives[] {
  return [fewerRepeats(about, true), oversamplingDrafts(about, 'shorter'), shorterGap(about), shorterPad(about)].map(
    (drafts) => orWithOffset(about, drafts),
  );
}

/** Another length opens a loop that the frequency offset closed: where no draft holds as it is, the offset moves with it. */
function* orWithOffset({ document }: Case, drafts: Alternatives): Alternatives {
  const asTheyAre: Draft[] = [];
  for (const draft of drafts) {
    asTheyAre.push(draft);
    yield draft;
  }
  const before = loopClosing(document.content);
  if (!before.applies || !before.closes || document.content.frequencyOffsetHz === 0) return;
  for (const draft of asTheyAre) {
    const after = loopClosing(applyChanges(document, draft.changes).content);
    if (after.closes) continue;
    yield {
      ...draft,
      label: `${draft.label}, and move the offset`,
      changes: [...draft.changes, change(document, '/content/frequencyOffsetHz', after.nearestOffsetHz + 0)],
      effect: `${draft.effect} The signal moves by ${spellHz(after.nearestChangeHz, 3)}, so that the loop stays closed.`,
    };
  }
}

export function repeatsDraft(document: Case['document'], repeats: number): Draft {
  const length = withRepeats(document, repeats);
  return {
    kind: repeats < document.content.timing.repeats ? 'dropRepeats' : 'repeats',
    label: `${repeatLabel(repeats)}: ${spell(length)}`,
    changes: [change(document, '/content/timing/repeats', repeats)],
    effect: lengthWords(document, length),
  };
}

function* moreRepeats({ document, bench }: Case): Alternatives {
  const { repeats } = document.content.timing;
  const samples = fileSamples(document.content);
  const one = samplesOfRepeat(document);
  const room = Math.floor((Math.min(usableMost(bench.content), SAMPLES_MOST) - samples) / one);
  let tries = TRIES;
  for (let more = 1; more <= Math.min(room, REPEATS_MOST - repeats) && tries > 0; more++) {
    if (!isLoadable(samples + more * one, bench.content)) continue;
    tries--;
    yield repeatsDraft(document, repeats + more);
  }
}

/** The most repeats below the present ones: of a length that loads, else (`isForMemory`) as many as the memory holds, filled up or as they are. */
function* fewerRepeats({ document, bench }: Case, isForMemory: boolean): Alternatives {
  const { repeats } = document.content.timing;
  const most = usableMost(bench.content);
  let tries = TRIES;
  let largest = 0;
  for (let fewer = repeats - 1; fewer >= 1 && tries > 0; fewer--) {
    const length = withRepeats(document, fewer);
    if (largest === 0 && length <= most) largest = fewer;
    if (!isLoadable(length, bench.content)) continue;
    tries--;
    yield repeatsDraft(document, fewer);
  }
  if (largest === 0 || !isForMemory) return;
  const before = withRepeats(document, largest);
  const length = allowedLength(before, bench.content);
  if (length > before && length <= most) {
    const { padSamples } = document.content.timing;
    yield {
      ...repeatsDraft(document, largest),
      label: `${repeatLabel(largest)} and pad with ${spell(length - before)}: ${spell(length)}`,
      changes: [
        change(document, '/content/timing/repeats', largest),
        change(document, '/content/timing/padSamples', padSamples + length - before),
      ],
      effect: `${lengthWords(document, length)} ${silenceWords(document, length - before, length)}`,
    };
  }
  yield repeatsDraft(document, largest);
}

/** A gap stands after every repeat; with one repeat at the base rate it is the same as a pad. */
function* longerGap({ document, bench }: Case): Alternatives {
  const { content } = document;
  const { gapSamples, repeats } = content.timing;
  if (repeats === 1) return;
  const samples = fileSamples(content);
  const one = repeats * content.oversampling;
  const room = Math.floor((usableMost(bench.content) - samples) / one);
  let tries = TRIES;
  const least = Math.max(1, Math.ceil((bench.content.leastSamples - samples) / one));
  const span = Math.min(room, least + bench.content.granularitySamples, PAD_MOST - gapSamples);
  for (let more = least; more <= span && tries > 0; more++) {
    const length = samples + more * one;
    if (!isLoadable(length, bench.content)) continue;
    tries--;
    yield gapDraft(document, gapSamples + more, length);
  }
}

function gapDraft(document: Case['document'], gapSamples: number, length: number): Draft {
  const before = document.content.timing.gapSamples;
  const by = Math.abs(gapSamples - before);
  return {
    kind: 'gap',
    label: `${gapSamples > before ? 'Lengthen' : 'Shorten'} the gap by ${spell(by)}: ${spell(length)}`,
    changes: [change(document, '/content/timing/gapSamples', gapSamples)],
    effect: `${counted(by, 'sample')} of silence ${gapSamples > before ? 'more' : 'fewer'} after each repeat, before oversampling. ${lengthWords(document, length)}`,
  };
}

function* longerPad({ document, bench }: Case): Alternatives {
  const { padSamples } = document.content.timing;
  const samples = fileSamples(document.content);
  const most = Math.min(usableMost(bench.content), SAMPLES_MOST);
  const first = allowedLength(samples, bench.content);
  for (let i = 0; i < TRIES; i++) {
    const length = first + i * bench.content.granularitySamples;
    const more = length - samples;
    if (length > most || padSamples + more > PAD_MOST) return;
    if (more === 0) continue;
    yield {
      kind: 'pad',
      label: `Pad with ${counted(more, 'silent sample')}: ${spell(length)}`,
      changes: [change(document, '/content/timing/padSamples', padSamples + more)],
      effect: silenceWords(document, more, length),
    };
  }
}

/** Far below the shortest length a mere pad is mostly silence: repeat first, then fill up. */
function* repeatsAndPad({ document, bench }: Case): Alternatives {
  const { repeats, padSamples } = document.content.timing;
  const samples = fileSamples(document.content);
  const fill = repeats + Math.floor((bench.content.leastSamples - samples) / samplesOfRepeat(document));
  if (fill <= repeats || fill > REPEATS_MOST) return;
  const before = withRepeats(document, fill);
  const length = allowedLength(before, bench.content);
  const more = length - before;
  if (more === 0) return;
  yield {
    kind: 'pad',
    label: `Repeat ${counted(fill, 'time')} and pad with ${spell(more)}: ${spell(length)}`,
    changes: [
      change(document, '/content/timing/repeats', fill),
      change(document, '/content/timing/padSamples', padSamples + more),
    ],
    effect: `${lengthWords(document, length)} ${silenceWords(document, more, length)}`,
  };
}

function* shorterGap({ document, bench }: Case): Alternatives {
  const { content } = document;
  const { gapSamples, repeats } = content.timing;
  const samples = fileSamples(content);
  const one = repeats * content.oversampling;
  const least = Math.ceil((samples - usableMost(bench.content)) / one);
  let tries = TRIES;
  let plain: Draft | null = null;
  for (let less = least; less <= Math.min(gapSamples, least + bench.content.granularitySamples) && tries > 0; less++) {
    const length = samples - less * one;
    plain ??= gapDraft(document, gapSamples - less, length);
    if (!isLoadable(length, bench.content)) continue;
    tries--;
    yield gapDraft(document, gapSamples - less, length);
  }
  if (plain) yield plain;
}

function* shorterPad({ document, bench }: Case): Alternatives {
  const { padSamples } = document.content.timing;
  const samples = fileSamples(document.content);
  for (let i = 0; i < TRIES; i++) {
    const length = usableMost(bench.content) - i * bench.content.granularitySamples;
    const less = samples - length;
    if (less > padSamples || length <= 0) return;
    yield {
      kind: 'pad',
      label: `Shorten the pad by ${spell(less)}: ${spell(length)}`,
      changes: [change(document, '/content/timing/padSamples', padSamples - less)],
      effect: lengthWords(document, length),
    };
  }
}
