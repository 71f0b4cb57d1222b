import { fileSamples } from '../../numerology';
import { applyChanges } from '../changes';
import { allowedLength, PAD_MOST } from '../limits';
import { counted } from '../words';
import { change, lengthWords, type Alternatives, type Case } from './draft';

/** The other mode, with a pad that keeps the length loadable where a burst's last suffix needs one. */
export function modeRemedies(about: Case): Alternatives[] {
  return [otherMode(about)];
}

function* otherMode({ document, bench }: Case): Alternatives {
  const { timing } = document.content;
  const mode = timing.mode === 'loop' ? 'burst' : 'loop';
  const changes = [change(document, '/content/timing/mode', mode)];
  const length = fileSamples(applyChanges(document, changes).content);
  const more = allowedLength(length, bench.content) - length;
  for (const pad of new Set([0, more])) {
    if (timing.padSamples + pad > PAD_MOST) continue;
    yield {
      kind: 'mode',
      label: `Make it a ${mode}`,
      changes:
        pad === 0 ? changes : [...changes, change(document, '/content/timing/padSamples', timing.padSamples + pad)],
      effect: `${mode === 'burst' ? 'Played once, its last suffix kept.' : 'Played round and round, its last suffix added onto the first symbol.'} ${lengthWords(document, length + pad)}${pad > 0 ? ` ${counted(pad, 'silent sample')} fill it up.` : ''}`,
    };
  }
}
