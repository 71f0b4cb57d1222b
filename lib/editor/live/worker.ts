import type { SampleEngine } from '@/lib/synth/index';
import { contentOf, openDocument, storedDocument } from '../document';
import { createDigestJob } from './digest';
import { liveFigures } from './figures';
import { createMirror } from './mirror';
import type { Mirror } from './mirror';
import { createPeakJob } from './peakJob';
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

/** Work beside the views: done in pieces whenever the views have nothing to do, one after another. */
interface Task {
  requestId: number;
  step(): boolean;
  /** What to answer after the last piece, and after a failure. */
  finished(): LiveAnswer;
  failed(message: string): LiveAnswer;
  /** What to tell after so many pieces; null: nothing. */
  progress: (() => LiveAnswer) | null;
}

/** Progress is told after so many symbols or pieces. */
const PROGRESS_EVERY = 32;

const wordsOf = (error: unknown) => (error instanceof Error ? error.message : String(error));

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
  let piecesSinceTold = 0;
  const tasks: Task[] = [];

  function schedule(): void {
    if (isScheduled) return;
    isScheduled = true;
    host.later(work);
  }

  function fail(error: unknown): void {
    isResultDue = false;
    host.post({ kind: 'failed', message: wordsOf(error) });
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
      symbolPaprBeforeDb: kept.plain && Float32Array.from(kept.plain.symbolPaprDb.subarray(0, symbolCount)),
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
      return tasks.length > 0;
    }
    const first = tasks[0];
    if (!first) return false;
    if (first.step()) {
      if (first.progress && ++piecesSinceTold % PROGRESS_EVERY === 0) host.post(first.progress());
      return true;
    }
    tasks.shift();
    host.post(first.finished());
    return tasks.length > 0;
  }

  function work(): void {
    isScheduled = false;
    try {
      if (piece()) schedule();
    } catch (error) {
      const task = isResultDue ? undefined : tasks.shift();
      if (task) host.post(task.failed(wordsOf(error)));
      else fail(error);
      if (tasks.length > 0) schedule();
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
    const failed = (message: string): LiveAnswer => ({ kind: 'digestFailed', requestId, message });
    if (!mirror) return host.post(failed('No document is open.'));
    try {
      // Its own copy: the document goes on changing while the digest is taken.
      const content = contentOf(openDocument(storedDocument(mirror.document)));
      const changeCount = mirror.changeCount();
      const job = createDigestJob(content, bench, host.engine);
      const finished = (): LiveAnswer => {
        const found = job.result();
        return found ? { kind: 'digest', requestId, changeCount, ...found } : failed('Nothing is painted.');
      };
      tasks.push({ requestId, step: job.step, finished, failed, progress: null });
    } catch (error) {
      host.post(failed(wordsOf(error)));
    }
  }

  function peak({ requestId, document, ask }: Extract<LiveRequest, { kind: 'peak' }>): void {
    const failed = (message: string): LiveAnswer => ({ kind: 'peakFailed', requestId, message });
    try {
      const job = createPeakJob(document.content, ask, host.engine);
      tasks.push({
        requestId,
        step: job.step,
        finished: () => ({ kind: 'peakDone', requestId, result: job.result() }),
        failed,
        progress: () => ({ kind: 'peakProgress', requestId, progress: job.progress() }),
      });
    } catch (error) {
      host.post(failed(wordsOf(error)));
    }
  }

  function cancel(requestId: number): void {
    const at = tasks.findIndex((task) => task.requestId === requestId);
    if (at >= 0) tasks.splice(at, 1);
  }

  return {
    receive(request) {
      try {
        if (request.kind === 'open') open(request);
        else if (request.kind === 'patch') patch(request);
        else if (request.kind === 'digest') digest(request);
        else if (request.kind === 'peak') peak(request);
        else if (request.kind === 'peakCancel') cancel(request.requestId);
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
  const { symbolPaprDb, symbolPaprBeforeDb, time, spectrum, ccdf, constellation } = answer.result;
  const traces = [time?.envelope, time?.i, time?.q, spectrum?.db];
  const arrays = [
    symbolPaprDb,
    ...(symbolPaprBeforeDb ? [symbolPaprBeforeDb] : []),
    ...traces.flatMap((trace) => (trace ? [trace.min, trace.max] : [])),
    ...(ccdf ? [ccdf.thresholdsDb, ccdf.probability, ccdf.gaussian] : []),
    ...(constellation ? [constellation.points] : []),
  ];
  return arrays.map((array) => array.buffer as ArrayBuffer);
}
