import type { WaveformDocument } from '@/lib/synth/index';
import { burstWithMarkers, mapsAndSequences, pilotComb } from './frames';
import { oddNumbers, phasedMultitone, twoTones } from './tones';

export interface Example {
  /** The file's name in this folder without its extension. */
  exampleId: string;
  build: () => WaveformDocument;
}

/** Six invented waveforms, one of each kind of thing that a document can say. The files beside this one are made from them. */
export const exampleDocuments: readonly Example[] = [
  { exampleId: 'two-tones', build: twoTones },
  { exampleId: 'phased-multitone', build: phasedMultitone },
  { exampleId: 'pilot-comb', build: pilotComb },
  { exampleId: 'burst-with-markers', build: burstWithMarkers },
  { exampleId: 'maps-and-sequences', build: mapsAndSequences },
  { exampleId: 'odd-numbers', build: oddNumbers },
];
