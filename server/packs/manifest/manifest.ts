import {
  contentDigest,
  documentDigest,
  intentDigest,
  packKey,
  profileDigest,
  profileFileDigest,
} from '@/lib/document/digest';
import { manifestSchema, type Manifest } from '@/lib/document/manifestSchema';
import {
  log10,
  loopClosing,
  synthVersion,
  type BenchProfile,
  type CellValues,
  type EvmFigure,
  type FrameLayout,
  type MeasuredLevels,
  type WaveformDocument,
  type WordScale,
} from '@/lib/synth';
import type { PayloadCount } from '../entryChunks.ts';
import type { MeasuredReduction } from '../measureReduction.ts';
import type { RenderingMeasure } from '../measureRendering.ts';
import type { PackState } from '../packTypes.ts';
import { packVersion } from '../packVersion.ts';
import type { VectorProof } from '../vectorProof.ts';
import { describeInks, describeStreams } from './describeInks.ts';
import { describeMarkers } from './describeMarkers.ts';
import {
  describeClock,
  describeRamp,
  describeSamples,
  describeSymbols,
  describeTransform,
  describeWord,
} from './describeNumbers.ts';

export interface ManifestInput {
  document: WaveformDocument;
  profile: BenchProfile;
  state: PackState;
  layout: FrameLayout;
  values: CellValues;
  scale: WordScale;
  measure: RenderingMeasure;
  proof: VectorProof;
  levels: MeasuredLevels;
  payloads: Map<number, PayloadCount>;
  files: Manifest['files'];
  safety: string[];
  reduction: MeasuredReduction | null;
}

/** Names the bytes of a pack before it is made: equal inputs have been rendered already. */
export function packKeyOf(document: WaveformDocument, profile: BenchProfile, state: PackState): string {
  return packKey({
    documentDigest: documentDigest(document),
    profileFileDigest: profileFileDigest(profile),
    state,
    synthVersion: String(synthVersion),
    packVersion,
  });
}

/** A dB value for JSON: silence (−∞) and what was not found are null. */
export const finiteOrNull = (db: number | null): number | null => (db !== null && Number.isFinite(db) ? db : null);

const evmOf = ({ ratio, db, cells }: EvmFigure) => ({
  cells,
  evmPercent: ratio === null ? 0 : 100 * ratio,
  evmDb: finiteOrNull(db),
});

function describePapr({ frame }: RenderingMeasure): Manifest['papr'] {
  const symbols = Array.from(frame.symbolPaprDb, (db, symbol) => ({ db, symbol })).filter(
    ({ db }) => !Number.isNaN(db),
  );
  const byPapr = [...symbols].sort((a, b) => a.db - b.db);
  const worst = byPapr.at(-1);
  const middle = byPapr.length >> 1;
  const median =
    byPapr.length === 0
      ? null
      : byPapr.length % 2 === 1
        ? byPapr[middle]!.db
        : (byPapr[middle - 1]!.db + byPapr[middle]!.db) / 2;
  return {
    frameDb: frame.power.paprDb ?? 0,
    activeFrameDb: frame.power.activePaprDb,
    meanPower: frame.power.meanPower,
    meanOver: 'the active spans of all repeats: prefixes and ramps in, gap and pad out, all-null symbols in',
    interpolation: frame.interpolation,
    worstSymbolDb: worst?.db ?? null,
    worstSymbol: worst?.symbol ?? null,
    medianSymbolDb: median,
  };
}

function describeProof({ proof, document, reduction }: ManifestInput): Manifest['proof'] {
  const { tray } = document.content;
  return {
    samplesRead: proof.samplesRead,
    wordsCompared: proof.wordsCompared,
    wordsDifferent: proof.wordsDifferent,
    ...evmOf(proof.evm.all),
    recipe: {
      cells: `${proof.evm.recipe.cells}${reduction === null ? '' : ', as they are sent after peak reduction'}, ${proof.evm.recipe.frames} frames pooled by power`,
      channel: 'none: no gain, phase or channel was fitted',
      phaseTracking: 'none',
      window: 'the useful part of each symbol, from its first sample; timing known',
      bias: 'none: nothing was fitted',
    },
    inks: proof.comparedInks
      .filter((ink) => proof.evm.byInk[ink]!.ratio !== null)
      .map((ink) => ({ inkId: tray[ink]!.inkId, name: tray[ink]!.name, ...evmOf(proof.evm.byInk[ink]!) })),
    worstUnpaintedDbc: finiteOrNull(proof.worstUnpainted?.dbc ?? null),
    worstUnpaintedSubcarrier: proof.worstUnpainted?.subcarrier ?? null,
  };
}

function describeLevels({ document, proof, levels }: ManifestInput): Manifest['levels'] {
  const headroom = (peakDbfs: number | null) => (peakDbfs === null ? null : 0 - peakDbfs);
  const dc = Math.sqrt(proof.dcI * proof.dcI + proof.dcQ * proof.dcQ);
  return {
    reference: document.content.level.reference,
    headroomDb: document.content.level.headroomDb,
    fileRmsDbfs: levels.fileRmsDbfs,
    activeRmsDbfs: levels.activeRmsDbfs,
    renderedPeakDbfs: levels.renderedPeakDbfs,
    renderedHeadroomDb: headroom(levels.renderedPeakDbfs),
    reconstructedPeakDbfs: levels.reconstructedPeakDbfs,
    reconstructedHeadroomDb: headroom(levels.reconstructedPeakDbfs),
    reconstructedPeakMethod: proof.reconstructedPeak.method,
    dcI: proof.dcI + 0,
    dcQ: proof.dcQ + 0,
    dcDbfs: dc === 0 ? null : 20 * log10(dc),
    saturatedComponents: proof.saturated.components,
    saturatedSamples: proof.saturated.samples,
  };
}

/** What the lowered peak reached and cost: dB over the frame's mean before, and values sent against values meant, of the data cells. */
function describeReduction({ reduction }: ManifestInput): Manifest['peakReduction'] {
  if (reduction === null) return null;
  const { kind, targetPaprDb, reachedPaprDb, passes, evm, evmGainFitted, meanPowerChangeDb } = reduction.report;
  return {
    kind,
    targetPaprDb,
    reachedPaprDb: reachedPaprDb ?? 0,
    passes,
    evmDb: finiteOrNull(evm.all.db),
    evmGainFittedDb: finiteOrNull(evmGainFitted.all.db),
    meanPowerChangeDb: meanPowerChangeDb ?? 0,
  };
}

/** The pack's own description. Built in the schema's key order and checked by it: a wrong manifest never leaves. */
export function makeManifest(input: ManifestInput): Manifest {
  const { document, profile, state } = input;
  const { content } = document;
  return manifestSchema.parse({
    format: 'combwright.manifest',
    version: 1,
    packKey: packKeyOf(document, profile, state),
    state: state === 'draft' ? 'draft' : 'released',
    edition: state === 'draft' ? null : state,
    digests: {
      contentDigest: contentDigest(content),
      intentDigest: intentDigest(document.intent),
      documentDigest: documentDigest(document),
      profileDigest: profileDigest(profile.content),
      profileFileDigest: profileFileDigest(profile),
      synthVersion: String(synthVersion),
      packVersion,
    },
    files: input.files,
    clock: describeClock(content, loopClosing(content)),
    samples: describeSamples(content, input.layout),
    word: describeWord(profile.content, input.scale.scale, input.proof.firstParts),
    levels: describeLevels(input),
    papr: describePapr(input.measure),
    symbols: describeSymbols(input.layout),
    ramp: describeRamp(input.layout),
    transform: describeTransform(content),
    inks: describeInks(input.values),
    streams: describeStreams(input.values, input.payloads),
    markers: describeMarkers(content),
    proof: describeProof(input),
    peakReduction: describeReduction(input),
    safety: input.safety,
  } satisfies Manifest);
}
