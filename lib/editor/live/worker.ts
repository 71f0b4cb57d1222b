import type { SampleEngine } from '@/lib/synth/index';
import { contentOf, openDocument, storedDocument } from '../document';
import { createDigestJob } from './digest';
import type { DigestJob } from './digest';
import { liveFigures } from './figures';
import { createMirror } from './mirror';
import type { Mirror } from './mirror';
import type { LiveAnswer, LiveRequest, LiveResult, LiveView } from './protocol';
import { ccdfTrace, constellationTrace, spectrumTrace, timeTrace } from './views';

/** What the worker's surroundings give: a way to answer, and to be called again after waiting messages were heard. */
export interface LiveHost {
  post(answer: LiveAnswer): void;
  later(task: () => void): void;
  /** What samples are computed with; without it the same bits, slower. */
  engine?: SampleEngine | undefined;
}

export interface LiveWorker {
  receive(request: LiveRequest): void;
}

/** Progress is told after so many symbols. */
const PROGRESS_EVERY = 32;

/** The live views' worker without its thread: hears patches, works a symbol at a time, answers when all is up to date. */
export function createLiveWorker(host: LiveHost): LiveWorker {
  let mirror: Mirror | null = null;
  let view: LiveView | null = null;
  let nextSequence = 1;
  let isAsking = false;
  let isResultDue = false;
  let isScheduled = false;
  let doneBefore = 0;
  let stepsSinceTold = 0;
  const digests: { requestId: number; changeCount: number; job: DigestJob }[] = [];

  function schedule(): void {
    if (isScheduled) return;
    isScheduled = true;
    host.later(work);
  }

  function fail(error: unknown): void {
    isResultDue = false;
    host.post({ kind: 'failed', message: error instanceof Error ? error.message : String(error) });
  }

  function result(from: Mirror, of: LiveView): LiveResult {
    const kept = from.kept();
    const { frame, content, waveform } = kept;
    const { symbolCount } = content;
    const average = kept.spectrum.spectrum();
    const power = frame.power();
    const done = waveform.synthesized();
    const symbolsDone = done >= doneBefore ? done - doneBefore : done;
    const time = timeTrace(kept, of);
    const figures = liveFigures(kept, of.symbol, average);
    doneBefore = waveform.synthesized();
    return {
      changeCount: from.changeCount(),
      symbolPaprDb: Float32Array.from(frame.symbolPaprDb.subarray(0, symbolCount)),
      worstSymbol: power.paprDb === null ? null : Math.min(power.peakSlot, symbolCount - 1),
      time,
      spectrum: spectrumTrace(kept, of, average),
      ccdf: ccdfTrace(kept),
      constellation: constellationTrace(kept, of),
      figures,
      symbolsDone,
    };
  }

  /** One piece of work; true when more is left. */
  function piece(): boolean {
    if (mirror && view && isResultDue) {
      if (mirror.toDo() > 0) {
        mirror.step();
        stepsSinceTold++;
        const symbolsToDo = mirror.toDo();
        if (symbolsToDo > 0 && stepsSinceTold % PROGRESS_EVERY === 0)
          host.post({ kind: 'progress', changeCount: mirror.changeCount(), symbolsDone: stepsSinceTold, symbolsToDo });
        return true;
      }
      isResultDue = false;
      stepsSinceTold = 0;
      host.post({ kind: 'result', result: result(mirror, view) });
      return digests.length > 0;
    }
    const first = digests[0];
    if (!first) return false;
    if (first.job.step()) return true;
    digests.shift();
    const digest = first.job.result();
    if (digest) host.post({ kind: 'digest', requestId: first.requestId, changeCount: first.changeCount, ...digest });
    else host.post({ kind: 'digestFailed', requestId: first.requestId, message: 'Nothing is painted.' });
    return digests.length > 0;
  }

  function work(): void {
    isScheduled = false;
    try {
      if (piece()) schedule();
    } catch (error) {
      const digest = isResultDue ? undefined : digests.shift();
      if (digest) host.post({ kind: 'digestFailed', requestId: digest.requestId, message: String(error) });
      else fail(error);
      if (digests.length > 0) schedule();
    }
  }

  function open(request: Extract<LiveRequest, { kind: 'open' }>): void {
    mirror = createMirror(request.document, request.changeCount, host.engine);
    view = request.view;
    nextSequence = 1;
    isAsking = false;
    isResultDue = true;
    doneBefore = 0;
  }

  function patch(request: Extract<LiveRequest, { kind: 'patch' }>): void {
    if (!mirror || isAsking) return;
    if (request.sequence !== nextSequence) {
      isAsking = true;
      host.post({ kind: 'documentWanted' });
      return;
    }
    nextSequence++;
    mirror.apply(request.patch, request.changeCount);
    isResultDue = true;
  }

  function digest({ requestId, bench }: Extract<LiveRequest, { kind: 'digest' }>): void {
    if (!mirror) return host.post({ kind: 'digestFailed', requestId, message: 'No document is open.' });
    try {
      // Its own copy: the document goes on changing while the digest is taken.
      const content = contentOf(openDocument(storedDocument(mirror.document)));
      digests.push({ requestId, changeCount: mirror.changeCount(), job: createDigestJob(content, bench, host.engine) });
    } catch (error) {
      host.post({ kind: 'digestFailed', requestId, message: error instanceof Error ? error.message : String(error) });
    }
  }

  return {
    receive(request) {
      try {
        if (request.kind === 'open') open(request);
        else if (request.kind === 'patch') patch(request);
        else if (request.kind === 'digest') digest(request);
        else {
          view = request.view;
          isResultDue = mirror !== null;
        }
      } catch (error) {
        fail(error);
      }
      schedule();
    },
  };
}

/** The buffers of an answer, to be handed over instead of copied. */
export function transfersOf(answer: LiveAnswer): ArrayBuffer[] {
  if (answer.kind !== 'result') return [];
  const { symbolPaprDb, time, spectrum, ccdf, constellation } = answer.result;
  const traces = [time?.envelope, time?.i, time?.q, spectrum?.db];
  const arrays = [
    symbolPaprDb,
    ...traces.flatMap((trace) => (trace ? [trace.min, trace.max] : [])),
    ...(ccdf ? [ccdf.thresholdsDb, ccdf.probability, ccdf.gaussian] : []),
    ...(constellation ? [constellation.points] : []),
  ];
  return arrays.map((array) => array.buffer as ArrayBuffer);
}
