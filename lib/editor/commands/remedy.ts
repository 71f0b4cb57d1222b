import type { PlainChange } from '@/lib/synth/index';
import type { EditorDocument } from '../document';
import type { Outcome } from './outcome';
import { planSettings } from './settings';
import type { SettingsChange } from './settings';

type Tree = Record<string, unknown>;

const unescapeStep = (step: string) => step.replace(/~1/g, '/').replace(/~0/g, '~');

function same(a: unknown, b: unknown): boolean {
  return JSON.stringify(a) === JSON.stringify(b);
}

/** A copy of `tree` with the value at the steps replaced; undefined when the place is not there or does not hold `before`. */
function replaced(tree: unknown, steps: readonly string[], change: PlainChange): unknown {
  const [step, ...rest] = steps;
  if (step === undefined) return same(tree, change.before) ? change.after : undefined;
  if (typeof tree !== 'object' || tree === null || !(step in tree)) return undefined;
  const inner = replaced((tree as Tree)[step], rest, change);
  if (inner === undefined) return undefined;
  if (Array.isArray(tree)) return tree.map((item: unknown, at) => (String(at) === step ? inner : item));
  return { ...tree, [step]: inner };
}

/**
 * A remedy's plain changes as one patch. Refused when a value is no longer what the finding saw, or when the document would
 * break a rule. A remedy never touches cells.
 */
export function planRemedy(document: EditorDocument, changes: readonly PlainChange[], label: string): Outcome {
  let tree: unknown = { content: document.settings, about: document.about, intent: document.intent };
  for (const change of changes) {
    const steps = change.pointer.split('/').slice(1).map(unescapeStep);
    tree = replaced(tree, steps, change);
    if (tree === undefined)
      return { kind: 'refused', message: 'The waveform has changed since this was found. Check again.' };
  }
  const { content, about, intent } = tree as { content: SettingsChange } & Required<
    Pick<SettingsChange, 'about' | 'intent'>
  >;
  return planSettings(document, { ...content, about, intent }, label);
}
