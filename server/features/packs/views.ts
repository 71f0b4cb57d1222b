import type { DeviceCard, DeviceIntent, Pack, PackDetail, PackJob } from '@/lib/contracts/packs';
import type { Manifest } from '@/lib/document/manifestSchema';
import {
  cautions,
  levelCard,
  type BenchProfile,
  type Caution,
  type LevelCard,
  type MeasuredLevels,
  type WaveformContent,
} from '@/lib/synth';
import type { PackProgress } from '../../packs/packTypes.ts';
import type { JobRow, listDeviceCardRows, PackRow } from './repo.ts';

export function toPack(row: PackRow): Pack {
  return {
    packId: row.id,
    waveformId: row.waveformId,
    revisionId: row.revisionId,
    revisionNumber: row.revisionNumber,
    title: row.editionTitle ?? row.revisionTitle,
    state: row.editionId === null ? 'draft' : row.withdrawnBy === null ? 'released' : 'withdrawn',
    editionNumber: row.editionNumber,
    withdrawn:
      row.withdrawnBy === null
        ? null
        : {
            by: { personId: row.withdrawnBy, name: row.withdrawnByName ?? '' },
            atMs: row.withdrawnAtMs ?? 0,
            reason: row.withdrawnReason ?? '',
          },
    bench: { benchId: row.benchId, version: row.benchVersion, name: row.benchName },
    fileName: row.fileName,
    fileBytes: row.fileBytes,
    fileDigest: `sha256:${row.fileSha256}`,
    vectorDigest: `sha256:${row.vectorSha256}`,
    vectorName: row.vectorName,
    samples: row.samples,
    sampleClockHz: row.sampleClockHz,
    evmDb: row.evmDb,
    madeBy: { personId: row.madeBy, name: row.madeByName },
    madeAtMs: row.madeAtMs,
  };
}

export function toPackJob(row: JobRow, progress: PackProgress | null): PackJob {
  const { job } = row;
  return {
    jobId: job.id,
    waveformId: row.waveformId,
    revisionId: job.revisionId,
    title: row.title,
    editionNumber: row.editionNumber,
    bench: { benchId: row.benchId, version: row.benchVersion, name: row.benchName },
    state: job.state,
    step: job.state === 'running' ? (progress?.step ?? 'rendering') : null,
    doneRatio: job.state === 'done' ? 1 : (progress?.doneRatio ?? 0),
    startedAgain: job.starts > 1,
    problem: job.problemCode === null ? null : { code: job.problemCode, detail: job.problemDetail ?? '' },
    packId: job.packId,
    askedBy: { personId: job.askedBy, name: row.askedByName },
    askedAtMs: job.createdAtMs,
    endedAtMs: job.endedAtMs,
  };
}

/** What a card is reckoned from, all of it kept with the pack: no document is read for it. */
export interface CardSource {
  manifest: Manifest;
  intent: DeviceIntent;
  benchProfile: BenchProfile;
  state: Pack['state'];
  editionNumber: number | null;
  vectorSha256: string;
  fetched: string;
}

export function levelsOf({ levels }: Manifest): MeasuredLevels {
  const { fileRmsDbfs, activeRmsDbfs, renderedPeakDbfs, reconstructedPeakDbfs, saturatedComponents } = levels;
  return { fileRmsDbfs, activeRmsDbfs, renderedPeakDbfs, reconstructedPeakDbfs, saturatedComponents };
}

export function cardOf(
  source: CardSource,
  intent: DeviceIntent = source.intent,
): { card: LevelCard; cautions: Caution[] } {
  const { samples, clock } = source.manifest;
  const [numerator, denominator] = clock.subcarrierSpacingFraction;
  // The card reads the sample clock of a content and nothing else of it.
  const content = {
    fftSize: samples.fftSize,
    oversampling: samples.oversampling,
    subcarrierSpacingHz: [Number(numerator), Number(denominator)],
  } as Partial<WaveformContent> as WaveformContent;
  const card = levelCard({ content, intent }, source.benchProfile, levelsOf(source.manifest));
  const { state, editionNumber: edition, vectorSha256: digest, fetched } = source;
  return { card, cautions: cautions(card, { state, edition, digest, fetched }) };
}

export function toDeviceCard(row: ReturnType<typeof listDeviceCardRows>[number], source: CardSource): DeviceCard {
  const intent = JSON.parse(row.card.intentJson) as DeviceIntent;
  return {
    cardId: row.card.id,
    deviceName: row.card.deviceName,
    intent,
    enteredBy: { personId: row.card.enteredBy, name: row.enteredByName },
    enteredAtMs: row.card.enteredAtMs,
    ...cardOf(source, intent),
  };
}

/** Minutes in UTC, said so: the server does not know where its reader is. */
export const timeWords = (ms: number): string => `${new Date(ms).toISOString().slice(0, 16).replace('T', ' ')} UTC`;

export function toPackDetail(
  row: PackRow,
  source: CardSource,
  deviceCards: DeviceCard[],
  fetchedAtMs: number,
): PackDetail {
  const card = cardOf(source);
  // the manifest's safety text: a draft's mark, the cautions, then what the fit says
  const { safety, state } = source.manifest;
  return {
    ...toPack(row),
    fetchedAtMs,
    ...card,
    notices: safety.slice(card.cautions.length + (state === 'draft' ? 1 : 0)),
    deviceCards,
    levels: levelsOf(source.manifest),
    intent: source.intent,
    benchProfile: source.benchProfile,
    files: source.manifest.files.map(({ name, role, bytes, sha256 }) => ({
      name,
      role,
      bytes,
      digest: `sha256:${sha256}`,
    })),
    manifest: source.manifest,
  };
}
