import { useCallback, useEffect, useRef, useState } from 'react';
import type { CaptureLayout, CaptureResult, ChannelSource, Likeness, NullPower, WaveformContent } from '@/lib/synth';
import type { CaptureAnswer, CaptureRequest } from './captureProtocol';

/** A chosen capture: one file, or I's and Q's, with what its bytes say. */
export interface ChosenCapture {
  files: File[];
  name: string;
  bytes: number;
  layout: CaptureLayout;
  /** Who says so. */
  from: 'bytes' | 'metadata' | 'you';
  /** What the file itself says; null where it says none. */
  clockHz: number | null;
}

export type CaptureStep = 'reading' | 'synchronizing' | 'demodulating' | 'comparing';

export type CaptureState =
  | { kind: 'empty'; words: string | null }
  | { kind: 'guessing'; name: string }
  | { kind: 'chosen'; words: string | null }
  | { kind: 'running'; step: CaptureStep; doneRatio: number }
  | {
      kind: 'done';
      result: CaptureResult;
      readingWords: string;
      samples: number;
      fileNulls: NullPower | null;
      alike: Likeness[] | null;
    };

/** Larger captures take longer than anybody waits at a bench. */
export const captureBytesMost = 2 ** 31;

/** Data and metadata of what was chosen: a SigMF pair comes as two files in any order. */
function sorted(files: readonly File[]): { data: File[]; meta: File | null } {
  const meta = files.find(({ name }) => name.endsWith('.sigmf-meta')) ?? null;
  return { data: files.filter((file) => file !== meta), meta };
}

/** Reads captures in a thread of its own, one at a time; leaving the page or Cancel ends it. */
export function useCapture() {
  const [state, setState] = useState<CaptureState>({ kind: 'empty', words: null });
  const [chosen, setChosen] = useState<ChosenCapture | null>(null);
  const worker = useRef<Worker | null>(null);
  /** Counts what was asked: an answer to what was given up means nothing any more. */
  const asked = useRef(0);

  const end = useCallback(() => {
    asked.current++;
    worker.current?.terminate();
    worker.current = null;
  }, []);
  useEffect(() => end, [end]);

  /** One request to a new thread; `progress` may come before the answer. */
  const ask = useCallback(
    (request: CaptureRequest, onAnswer: (answer: CaptureAnswer) => void) => {
      end();
      const own = new Worker(new URL('./capture.worker.ts', import.meta.url));
      worker.current = own;
      own.onmessage = (event: MessageEvent<CaptureAnswer>) => {
        if (event.data.kind === 'progress') {
          setState({ kind: 'running', step: event.data.stage, doneRatio: event.data.doneRatio });
          return;
        }
        end();
        onAnswer(event.data);
      };
      own.onerror = (event) => {
        event.preventDefault();
        end();
        onAnswer({ kind: 'failed', words: 'The file could not be read.' });
      };
      own.postMessage(request);
    },
    [end],
  );

  const choose = useCallback(
    (files: readonly File[], expected: CaptureLayout | null) => {
      const { data, meta } = sorted(files);
      const first = data[0];
      if (first === undefined) {
        if (meta) setState({ kind: 'empty', words: 'That is the metadata alone. Choose the recording with it.' });
        return;
      }
      const refuse = (words: string) => {
        setChosen(null);
        setState({ kind: 'empty', words });
      };
      if (data.length > 2) return refuse('One file, or two for I and Q, or a SigMF pair.');
      if (data.some(({ size }) => size > captureBytesMost)) return refuse('Larger than 2 GB. Cut the capture.');
      setState({ kind: 'guessing', name: first.name });
      ask({ kind: 'guess', files: data, meta, expected }, (answer) => {
        if (answer.kind === 'failed') return refuse(answer.words);
        if (answer.kind !== 'guessed') return;
        if (!answer.outcome.ok) return refuse(answer.outcome.message);
        setChosen({
          files: data,
          name: data.map(({ name }) => name).join(', '),
          bytes: data.reduce((sum, { size }) => sum + size, 0),
          layout: answer.outcome.layout,
          from: meta ? 'metadata' : 'bytes',
          clockHz: answer.outcome.clockHz,
        });
        setState({ kind: 'chosen', words: null });
      });
    },
    [ask],
  );

  /** Measures the chosen capture; where it is not recognised, `others` are compared with it. */
  const measure = useCallback(
    (
      capture: ChosenCapture,
      options: {
        content: WaveformContent;
        clockHz: number | null;
        channel: ChannelSource;
        words: { scale: number; fullScale: number } | null;
      },
      others: () => Promise<WaveformContent[]>,
    ) => {
      const { files, layout } = capture;
      setState({ kind: 'running', step: 'reading', doneRatio: 0 });
      ask({ kind: 'measure', files, layout, ...options }, (answer) => {
        if (answer.kind === 'failed') return setState({ kind: 'chosen', words: answer.words });
        if (answer.kind !== 'measured') return;
        const { result, readingWords, samples, fileNulls } = answer;
        if (result.kind === 'refused') return setState({ kind: 'chosen', words: result.message });
        if (result.kind === 'measured')
          return setState({ kind: 'done', result, readingWords, samples, fileNulls, alike: null });
        setState({ kind: 'running', step: 'comparing', doneRatio: 0 });
        const turn = asked.current;
        const isCurrent = () => asked.current === turn;
        void others().then(
          (contents) =>
            isCurrent() &&
            ask({ kind: 'compare', files, layout, clockHz: options.clockHz, contents }, (compared) =>
              setState({
                kind: 'done',
                result,
                readingWords,
                samples,
                fileNulls,
                alike: compared.kind === 'compared' ? compared.alike : [],
              }),
            ),
          () => isCurrent() && setState({ kind: 'done', result, readingWords, samples, fileNulls, alike: [] }),
        );
      });
    },
    [ask],
  );

  const cancel = useCallback(() => {
    end();
    setState({ kind: 'chosen', words: 'Cancelled. Nothing was kept.' });
  }, [end]);

  const again = useCallback(() => {
    end();
    setChosen(null);
    setState({ kind: 'empty', words: null });
  }, [end]);

  return { state, chosen, setChosen, choose, measure, cancel, again };
}
