import { fractionToNumber, sidednessPlan, type BenchProfile, type WaveformDocument } from '@/lib/synth/index';
import { canonicalJson } from './digest';
import type { Issue } from './issues';
import { emptyDocument } from './newDocument';

export interface Sidedness {
  document: WaveformDocument;
  /** What an operator has to see, and what it means if they do not. */
  words: string;
}

/** A frequency in the unit that leaves it a short number. */
function inWords(hz: number): string {
  const [size, unit] = hz >= 1e9 ? [1e9, 'GHz'] : hz >= 1e6 ? [1e6, 'MHz'] : hz >= 1e3 ? [1e3, 'kHz'] : [1, 'Hz'];
  return `${Number((hz / size).toPrecision(9))} ${unit}`;
}

/** The waveform of a profile's sidedness pack, or why the profile has no clock or length for it. */
export function sidednessOf(profile: BenchProfile): { ok: true; value: Sidedness } | { ok: false; issue: Issue } {
  const plan = sidednessPlan(profile.content);
  if ('path' in plan)
    return {
      ok: false,
      issue: { pointer: `/content/${plan.path.join('/')}`, message: plan.words, code: 'invalid' },
    };
  const tone = inWords(fractionToNumber(plan.toneHz));
  const words = `On an analyser the tone stands ${tone} above the carrier. If it stands below it, the generator takes I and Q the other way round, or Q with the other sign: change "swap I and Q", or else "negate Q", in the bench profile.`;
  const document = emptyDocument({
    title: `Sidedness: tone ${tone} above the carrier`,
    notes: words,
    content: plan.content,
  });
  return { ok: true, value: { document, words } };
}

/** The words of a profile's sidedness waveform where a document is just that, else null. */
export function sidednessWords(document: WaveformDocument, profile: BenchProfile): string | null {
  if (document.content.fftSize !== 16) return null;
  const sidedness = sidednessOf(profile);
  if (!sidedness.ok) return null;
  const { content } = sidedness.value.document;
  return canonicalJson(content) === canonicalJson(document.content) ? sidedness.value.words : null;
}
