import { fileSamples, fractionToNumber, prefixSum, sampleClock } from '../../numerology';
import { loopClosing, payloadClosing, toneJumps } from '../closing';
import { greatestCommonDivisor } from '../exact';
import { isLoadable, PAD_MOST, REPEATS_MOST, SAMPLES_MOST } from '../limits';
import { counted, spell, spellHz } from '../words';
import { change, lengthWords, silenceWords, withRepeats, type Alternatives, type Case, type Draft } from './draft';
import { repeatsDraft } from './lengthRemedies';

const TRIES = 4;
/** Pads looked at: the least one may not fill the granularity. */
const PADS_MOST = 4096;

/** Repeats that close offset and tones together, the offset that closes this length, a pad that closes this offset. */
export function seamRemedies(about: Case): Alternatives[] {
  return [closingRepeats(about), closingOffset(about), closingPad(about)];
}

/** Repeats after which every continuous tone that crosses the wrap is back at its phase; null above 65536. */
function repeatsOfTones({ document, facts }: Case): number | null {
  const { content } = document;
  const one = prefixSum(content) + content.symbolCount * content.fftSize;
  let repeats = 1;
  for (const { ink, position } of facts.toneBorders(content).lastToFirst) {
    const value = content.tray[ink]!.value as { continuous: boolean };
    if (!value.continuous) continue;
    const k = Math.abs(position - Math.floor(content.fftSize / 2));
    const rest = Number((BigInt(k) * BigInt(one)) % BigInt(content.fftSize));
    const own = content.fftSize / greatestCommonDivisor(rest, content.fftSize);
    repeats *= own / greatestCommonDivisor(repeats, own);
    if (repeats > REPEATS_MOST) return null;
  }
  return repeats;
}

function* closingRepeats(about: Case): Alternatives {
  const { document, bench } = about;
  const { content } = document;
  const closing = loopClosing(content);
  const wraps = content.timing.gapSamples === 0 && content.timing.padSamples === 0;
  const ofTones = wraps ? repeatsOfTones(about) : 1;
  if (ofTones === null) return;
  const isOpen = content.frequencyOffsetHz !== 0 && !closing.closes;
  const first = content.frequencyOffsetHz === 0 ? 1 : closing.repeatsThatClose;
  const period = content.frequencyOffsetHz === 0 ? 1 : closing.repeatsPeriod;
  if (first === null || (isOpen && period === null)) return;
  let tries = TRIES;
  let least: Draft | null = null;
  for (let repeats = first; repeats <= REPEATS_MOST && tries > 0; repeats += period ?? REPEATS_MOST) {
    if (repeats % ofTones !== 0 || repeats === content.timing.repeats) continue;
    least ??= repeatsDraft(document, repeats);
    if (!isLoadable(withRepeats(document, repeats), bench.content)) continue;
    tries--;
    yield repeatsDraft(document, repeats);
  }
  // where the length does not load anyway, the seam may be closed first
  if (least) yield least;
}

function* closingOffset({ document }: Case): Alternatives {
  const closing = loopClosing(document.content);
  if (closing.closes || document.content.frequencyOffsetHz === 0) return;
  yield {
    kind: 'offset',
    label: `Move the offset to ${spellHz(closing.nearestOffsetHz)}`,
    changes: [change(document, '/content/frequencyOffsetHz', closing.nearestOffsetHz + 0)],
    effect: `The signal moves by ${spellHz(closing.nearestChangeHz, 3)}.`,
  };
}

function* closingPad({ document, bench }: Case): Alternatives {
  const { content } = document;
  const closing = loopClosing(content);
  if (content.frequencyOffsetHz === 0 || closing.closes || !closing.padThatCloses) return;
  const samples = fileSamples(content);
  const { more: first, period } = closing.padThatCloses;
  let least: Draft | null = null;
  let tries = TRIES;
  for (let i = 0; i < PADS_MOST && tries > 0; i++) {
    const more = first + i * period;
    const padSamples = content.timing.padSamples + more;
    // more silence than signal is no remedy
    if (more > samples || padSamples > PAD_MOST || samples + more > SAMPLES_MOST) break;
    if (more === 0) continue;
    const length = samples + more;
    const draft: Draft = {
      kind: 'pad',
      label: `Pad with ${counted(more, 'silent sample')}: ${spell(length)}`,
      changes: [change(document, '/content/timing/padSamples', padSamples)],
      effect: silenceWords(document, more, length),
    };
    least ??= draft;
    if (!isLoadable(length, bench.content)) continue;
    tries--;
    yield draft;
  }
  if (least) yield least;
}

/** Tones that jump at prefixes run on instead; where they then miss the wrap, with as many repeats as bring them back. */
export function toneRemedies(about: Case): Alternatives[] {
  return [tonesRunOn(about)];
}

function* tonesRunOn(about: Case): Alternatives {
  const { document, facts } = about;
  const { content } = document;
  const inks = toneJumps(content, facts.toneBorders(content)).inksBetweenSymbols;
  if (inks.length === 0) return;
  const changes = inks.map((inkId) => change(document, `/content/tray/${inkId.slice(1)}/value/continuous`, true));
  const label = inks.length === 1 ? 'Let the tone run on' : 'Let the tones run on';
  const effect = 'Their phase then differs from symbol to symbol.';
  yield { kind: 'tones', label, changes, effect };
  const runningOn = { ...document, content: { ...content, tray: content.tray.map((ink) => ink) } };
  for (const inkId of inks) {
    const place = Number(inkId.slice(1));
    const ink = runningOn.content.tray[place]!;
    runningOn.content.tray[place] = { ...ink, value: { ...ink.value, continuous: true } } as typeof ink;
  }
  const repeats = repeatsOfTones({ ...about, document: runningOn });
  if (repeats === null) return;
  for (let times = repeats, i = 0; times <= REPEATS_MOST && i < TRIES; times += repeats, i++) {
    if (times === content.timing.repeats) continue;
    const length = withRepeats(document, times);
    yield {
      kind: 'tones',
      label: `${label} and repeat ${counted(times, 'time')}`,
      changes: [...changes, change(document, '/content/timing/repeats', times)],
      effect: `${effect} ${lengthWords(document, length)}`,
    };
  }
}

/** Every stream continued over as many repeats as close them all. */
export function payloadRemedies(about: Case): Alternatives[] {
  return [continuedPayload(about)];
}

function* continuedPayload({ document, facts }: Case): Alternatives {
  const { content } = document;
  const { streams, timing } = content;
  if (timing.mode === 'burst') return;
  const used = payloadClosing(content, { cellsOfInk: facts.cellsOfInk(content), periodOf: facts.periodOf });
  if (!used.some((stream) => stream.closes === false)) return;
  let repeats = 1;
  for (const stream of used) {
    if (stream.isFixed) continue;
    if (stream.repeatsToClose === null) return;
    repeats *= stream.repeatsToClose / greatestCommonDivisor(repeats, stream.repeatsToClose);
    if (repeats > REPEATS_MOST) return;
  }
  const changes = used.flatMap((stream) => {
    const place = streams.findIndex((one) => one.streamId === stream.streamId);
    if (stream.closes !== false || streams[place]!.acrossRepeats === 'continue') return [];
    return [change(document, `/content/streams/${place}/acrossRepeats`, 'continue')];
  });
  for (let times = repeats, i = 0; times <= REPEATS_MOST && i < TRIES; times += repeats, i++) {
    const length = withRepeats(document, times);
    const seconds = length / fractionToNumber(sampleClock(content));
    yield {
      kind: 'payload',
      label: `Continue the payload over ${counted(times, 'repeat')}`,
      changes: times === timing.repeats ? changes : [...changes, change(document, '/content/timing/repeats', times)],
      effect: `${lengthWords(document, length)} One pass takes ${spell(seconds, 3)} s.`,
    };
  }
}
