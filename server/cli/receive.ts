import {
  captureReadings,
  causeWords,
  clockBeyondWords,
  createLookAlikes,
  createReception,
  layoutOfBench,
  layoutWords,
  measuredSymbolsWords,
  notFollowedWords,
  recipeWords,
  type CaptureReading,
  type CaptureStage,
  type EvmFigure,
  type Likeness,
  type MeasuredCapture,
} from '@/lib/synth';
import { PackError } from '../packs/packError.ts';
import { sampleEngine } from '../sampleEngine.ts';
import type { ReceiveCommand } from './captureArguments.ts';
import { openCapture, type OpenCapture } from './captureFiles.ts';
import { done, refused, type Outcome } from './outcome.ts';
import { openPack, type OpenPack } from './packContents.ts';
import { reasonOf } from './readInputs.ts';
import { runSteps } from './runSteps.ts';

const stageWords: Record<CaptureStage, string> = {
  reading: 'Reading',
  synchronizing: 'Synchronizing',
  demodulating: 'Demodulating',
};

const percent = (done: number): string => `${Math.floor(100 * done)} %`;
const cancelled = () => refused('cancelled', 'Cancelled. Nothing was kept.');

/** receive capture pack.zip: what a recorded capture says about the device, against the pack's own waveform. */
export async function receive(command: ReceiveCommand, signal: AbortSignal): Promise<Outcome> {
  const packs: OpenPack[] = [];
  let capture: OpenCapture | null = null;
  try {
    for (const file of [command.pack, ...command.against]) {
      try {
        packs.push(await openPack(file));
      } catch (error) {
        if (error instanceof PackError) return refused(error.code, `${file}: ${error.message}`, error.issues);
        return refused('io_failed', `${file}: ${reasonOf(error)}.`);
      }
    }
    const pack = packs[0]!;
    const expected = layoutOfBench(pack.profile.content);
    const opened = await openCapture(command.capture, command.q, command.layout, expected);
    if (!opened.ok) return refused(opened.code, opened.message);
    capture = opened.capture;
    return await measure(command, pack, packs.slice(1), capture, signal);
  } finally {
    await capture?.close();
    for (const pack of packs) await pack.close();
  }
}

async function measure(
  command: ReceiveCommand,
  pack: OpenPack,
  others: OpenPack[],
  capture: OpenCapture,
  signal: AbortSignal,
): Promise<Outcome> {
  const opening = captureReadings(capture.sources, capture.layout);
  let readings: CaptureReading[] | null = null;
  let message: string | null = null;
  const isRead = await runSteps(
    () => {
      const next = opening.next();
      if (next.done !== true) return true;
      if (next.value.ok) readings = next.value.readings;
      else message = next.value.message;
      return false;
    },
    () => 'Reading',
    signal,
  );
  if (!isRead) return cancelled();
  if (readings === null) return refused('invalid', `${command.capture}: ${message ?? 'it could not be read'}`);
  const list: CaptureReading[] = readings;
  const clockHz = command.clockHz ?? capture.clockHz;
  const reception = createReception({
    content: pack.document.content,
    readings: list.map(({ source }) => source),
    clockHz,
    channel: command.channel,
    hasRails: capture.layout.word !== 'float32',
    engine: sampleEngine(),
    ...(command.mostSymbols === null ? {} : { mostSymbols: command.mostSymbols }),
  });
  const isDone = await runSteps(
    () => reception.step(),
    () => `${stageWords[reception.stage]} ${percent(reception.doneRatio)}`,
    signal,
  );
  if (!isDone) return cancelled();
  const result = reception.result();
  const layout = layoutWords(capture.layout);
  if (result.kind === 'refused') return refused(result.code, `${command.capture}: ${result.message}`);
  if (result.kind === 'measured') {
    const { words } = list[result.found.reading]!;
    // a guess of the bytes that did not hold is nobody's mistake
    const cause = causeWords(result.found, capture.isGuessed ? '' : words);
    const understood = words === '' ? layout : `${layout}, read ${words}`;
    return done(measuredLines(command, pack, result, understood, cause), {
      pack: pack.words,
      layout: understood,
      cause,
      recipe: recipeWords(result),
      result: plain(result),
    });
  }
  const looking = createLookAlikes(
    list[0]!.source,
    clockHz,
    others.map(({ document }) => document.content),
    sampleEngine(),
  );
  if (
    !(await runSteps(
      () => looking.step(),
      () => `Comparing ${percent(looking.doneRatio)}`,
      signal,
    ))
  )
    return cancelled();
  const alike = looking.result();
  const errors = [
    `${command.capture}: does not look like ${pack.words}.`,
    `  ${correlationWords(result.correlation)} No EVM is given.`,
    ...alike.map((one) => `  ${likenessWords(one, others[one.content]!, command.against[one.content]!)}`),
  ];
  const best = alike.find(({ isFound }) => isFound);
  if (best) errors.push(`  The generator probably plays ${others[best.content]!.words}.`);
  else if (others.length > 0) errors.push(`  It looks like none of the ${others.length} packs compared.`);
  return {
    exitCode: 1,
    lines: [],
    errors,
    json: {
      ok: false,
      code: 'not_recognised',
      message: errors[0],
      issues: [],
      more: 0,
      layout,
      result: plain(result),
      alike: alike.map((one) =>
        plain({ ...one, pack: command.against[one.content], words: others[one.content]!.words }),
      ),
    },
  };
}

/** A place may look alike while what follows does not. */
function correlationWords(correlation: { value: number; needed: number }): string {
  const value = `ρ ${correlation.value.toFixed(3)}`;
  const words = notFollowedWords(correlation, ' (--clock)');
  return words === null
    ? `${value}; it takes ${correlation.needed.toFixed(2)}, a match is near 1.`
    : `${value} ${words}`;
}

function likenessWords(one: Likeness, pack: OpenPack, file: string): string {
  if (one.correlation === null) return `${file}: could not be tried against this capture`;
  const how = one.isMirrored ? ', spectrum mirrored' : '';
  return `${file}: ρ ${one.correlation.toFixed(3)}, ${pack.words}${how}`;
}

const signed = (value: number, digits: number): string => `${value < 0 ? '−' : '+'}${Math.abs(value).toFixed(digits)}`;
const db = (value: number | null): string => (value === null ? 'not measured' : `${value.toFixed(2)} dB`);
const evmWords = ({ ratio, db: decibels }: EvmFigure): string =>
  ratio === null || decibels === null
    ? 'not measured'
    : `${Number((100 * ratio).toPrecision(3))} %, ${decibels.toFixed(2)} dB`;

function measuredLines(
  command: ReceiveCommand,
  pack: OpenPack,
  result: MeasuredCapture,
  layout: string,
  cause: string | null,
): string[] {
  const { statistics, evm, channel, nulls, imbalance } = result;
  const rows: [string, string][] = [
    ['EVM', `${evmWords(evm.all)} over ${result.isOverData ? 'the data cells' : 'all known cells'}`],
    ...pack.document.content.tray.flatMap((ink, place): [string, string][] => {
      const figure = evm.byInk[place];
      return figure === undefined || figure.cells === 0 ? [] : [[`  ${ink.name}`, evmWords(figure)]];
    }),
    ['SNR', `${db(result.snrDb)} in the used cells, before equalizing`],
    [
      'offset',
      `${signed(result.offsetHz, 2)} Hz${result.offsetSigmaHz === null ? '' : ` ± ${result.offsetSigmaHz.toPrecision(2)}`}, ${signed(result.offsetSubcarriers, 4)} subcarriers`,
    ],
    ['delay', `${(1e6 * result.delaySec).toFixed(4)} µs, ${result.delaySamples.toFixed(3)} samples of the capture`],
    ['clock', clockWords(result)],
    [
      'level',
      `${result.levelDbfs.toFixed(2)} dBFS, peak ${result.peakDbfs.toFixed(2)} dBFS, clipped ${share(statistics.clippedSamples, statistics.samples)}`,
    ],
    ['null cells', nullWords(nulls)],
    [
      'channel',
      `${channel.paths.length} ${channel.paths.length === 1 ? 'path' : 'paths'}: ${
        channel.paths
          .slice(0, 8)
          .map((path) => `${path.delaySamples} samples ${path.powerDb.toFixed(1)} dB`)
          .join(', ') || 'not measured'
      }; usable guard ${channel.guardSamples} samples`,
    ],
    ['image', boundWords(imbalance.image)],
    [
      'imbalance',
      imbalance.gainDb === null
        ? 'not seen'
        : `I over Q ${signed(imbalance.gainDb, 3)} dB, ${signed(imbalance.angleDeg!, 2)}°`,
    ],
    ['DC', boundWords(imbalance.dc)],
    ['ρ', result.correlation.value.toFixed(4)],
    ['layout', layout],
  ];
  const notes = [
    recipeWords(result),
    measuredSymbolsWords(result),
    cause,
    result.isCut
      ? `${result.symbols === 1 ? 'The first symbol was' : `The first ${result.symbols} symbols were`} measured; the capture holds more (--symbols).`
      : null,
    result.lostSubcarriers > 0
      ? `${result.lostSubcarriers} subcarriers lie outside of the capture's band: no figure of them.`
      : null,
  ].filter((note) => note !== null);
  return [
    `${command.capture}: ${pack.words}`,
    ...rows.map(([name, value]) => `  ${name.padEnd(13)} ${value}`),
    ...notes.map((note) => `  ${note}`),
  ];
}

function share(part: number, whole: number): string {
  return part === 0 ? 'nothing' : `${Number(((100 * part) / whole).toPrecision(3))} % of the samples`;
}

function clockWords({ clockRatio: [p, q], clockErrorPpm, clockErrorSigmaPpm, isClockShared }: MeasuredCapture): string {
  const ratio = `${p}/${q} of the vector's`;
  if (clockErrorPpm === null) return `${ratio}, its error not measured: one symbol`;
  const sigma = clockErrorSigmaPpm === null ? '' : ` ± ${clockErrorSigmaPpm.toPrecision(2)}`;
  const beyond = clockBeyondWords(clockErrorPpm);
  return isClockShared
    ? `${ratio}, no error seen (0${sigma} ppm)`
    : `${ratio}, ${signed(clockErrorPpm, 3)}${sigma} ppm${beyond === null ? '' : `: ${beyond} (--clock)`}`;
}

function nullWords({ notch, inside, worst }: MeasuredCapture['nulls']): string {
  if (inside === null) return 'none inside the painted span';
  return [
    notch === null ? null : `notch ${notch.lowSubcarrier}…${notch.highSubcarrier} ${db(notch.db)}`,
    `all inside ${db(inside.db)}`,
    worst === null ? null : `worst ${db(worst.db)} at symbol ${worst.symbol}, subcarrier ${worst.subcarrier}`,
  ]
    .filter((part) => part !== null)
    .join(', ');
}

function boundWords(figure: MeasuredCapture['imbalance']['dc']): string {
  return figure === null ? 'not measured' : `${figure.isBound ? 'below ' : ''}${figure.db.toFixed(1)} dB to the signal`;
}

/** Typed arrays as lists, so that --json holds figures and nothing of the program. */
function plain(value: unknown): unknown {
  if (ArrayBuffer.isView(value))
    return Array.from(value as Float64Array, (item) => (Number.isFinite(item) ? item : null));
  if (Array.isArray(value)) return value.map(plain);
  if (typeof value === 'object' && value !== null)
    return Object.fromEntries(Object.entries(value).map(([key, item]) => [key, plain(item)]));
  return value;
}
