import {
  captureReadings,
  createLookAlikes,
  createReception,
  fileNullPower,
  guessLayout,
  readSigmfMeta,
  type ByteSource,
  type CaptureLayout,
  type CaptureReading,
} from '@/lib/synth/index';
import type { CaptureAnswer, CaptureRequest } from './captureProtocol';
import { loadEngine } from './loadEngine';

// The thread that reads a capture against its edition: nothing leaves the device. A page that cancels ends the thread.
interface WorkerScope {
  onmessage: ((event: { data: CaptureRequest }) => void) | null;
  postMessage(message: CaptureAnswer): void;
}
/** Only threads have it: reads at once. */
declare class FileReaderSync {
  readAsArrayBuffer(blob: Blob): ArrayBuffer;
}
const scope = globalThis as unknown as WorkerScope;

const BLOCK_BYTES = 1048576;
const PROGRESS_EVERY_MS = 60;

/** A file as bytes read where asked, by blocks of 1 MiB of which the last is kept. */
function bytesOf(file: File): ByteSource {
  const reader = new FileReaderSync();
  let block = new Uint8Array(0);
  let blockAt = -1;
  return {
    bytes: file.size,
    read(at, count, out) {
      for (let done = 0; done < count;) {
        const from = Math.floor((at + done) / BLOCK_BYTES) * BLOCK_BYTES;
        if (from !== blockAt) {
          block = new Uint8Array(reader.readAsArrayBuffer(file.slice(from, from + BLOCK_BYTES)));
          blockAt = from;
        }
        const start = at + done - from;
        const part = Math.min(count - done, block.length - start);
        if (part <= 0) throw new Error('The file ended while it was read.');
        out.set(block.subarray(start, start + part), done);
        done += part;
      }
    },
  };
}

function runSteps(step: () => boolean, told: () => CaptureAnswer): void {
  let last = performance.now();
  while (step()) {
    if (performance.now() - last < PROGRESS_EVERY_MS) continue;
    last = performance.now();
    scope.postMessage(told());
  }
}

/** Text is indexed first; words are read where they lie. Throws in words. */
function openReadings(files: File[], layout: CaptureLayout): CaptureReading[] {
  const opening = captureReadings(files.map(bytesOf), layout);
  let readings: CaptureReading[] = [];
  let doneRatio = 0;
  runSteps(
    () => {
      const next = opening.next();
      if (next.done !== true) {
        doneRatio = next.value;
        return true;
      }
      if (!next.value.ok) throw new Error(next.value.message);
      readings = next.value.readings;
      return false;
    },
    () => ({ kind: 'progress', stage: 'reading', doneRatio }),
  );
  return readings;
}

async function answer(request: CaptureRequest): Promise<CaptureAnswer> {
  if (request.kind === 'guess') {
    const { files, meta, expected } = request;
    const outcome = meta
      ? readSigmfMeta(await meta.text())
      : guessLayout(bytesOf(files[0]!), expected, files.length > 1);
    return { kind: 'guessed', outcome };
  }
  const engine = await loadEngine();
  const readings = openReadings(request.files, request.layout);
  if (request.kind === 'compare') {
    const looking = createLookAlikes(readings[0]!.source, request.clockHz, request.contents, engine);
    runSteps(
      () => looking.step(),
      () => ({ kind: 'progress', stage: 'comparing', doneRatio: looking.doneRatio }),
    );
    return { kind: 'compared', alike: looking.result() };
  }
  const reception = createReception({
    content: request.content,
    readings: readings.map(({ source }) => source),
    clockHz: request.clockHz,
    channel: request.channel,
    hasRails: request.layout.word !== 'float32',
    engine,
  });
  runSteps(
    () => reception.step(),
    () => ({ kind: 'progress', stage: reception.stage, doneRatio: reception.doneRatio }),
  );
  const result = reception.result();
  const readingWords = result.kind === 'measured' ? readings[result.found.reading]!.words : '';
  const fileNulls =
    result.kind === 'measured' && request.words ? fileNullPower(request.content, request.words, engine) : null;
  return { kind: 'measured', result, readingWords, samples: readings[0]!.source.samples, fileNulls };
}

scope.onmessage = ({ data }) =>
  void answer(data).then(
    (told) => scope.postMessage(told),
    (error: unknown) =>
      scope.postMessage({
        kind: 'failed',
        words: error instanceof Error ? error.message : 'The file could not be read.',
      }),
  );
