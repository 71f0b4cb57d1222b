import type { LiveAnswer, LiveRequest, LiveResult, LiveView } from '@/lib/editor/live/protocol';
import { createLiveWorker } from '@/lib/editor/live/worker';
import type { LiveClient } from '@/lib/editor/live/client';
import { createLiveClient } from '@/lib/editor/live/client';
import type { Editor } from '@/lib/editor/store';

export const wholeView = (fftSize: number, changes: Partial<LiveView> = {}): LiveView => ({
  symbol: 0,
  timeWidthPx: 200,
  timeRange: null,
  spectrumWidthPx: fftSize,
  positionRange: { from: 0, to: fftSize },
  ink: 1,
  ...changes,
});

/** The live worker in the test's own thread: tasks run when asked to, messages are copied as between threads. */
export interface LiveDesk {
  client: LiveClient;
  answers: LiveAnswer[];
  /** Runs what waits until nothing does. */
  settle(): LiveDesk;
  /** Runs so many pieces. */
  run(pieces: number): LiveDesk;
  result(): LiveResult;
  /** The next patch never arrives. */
  loseNext(): void;
  /** The thread dies. */
  crash(): void;
}

export function liveDesk(editor: Editor, view: LiveView): LiveDesk {
  const tasks: (() => void)[] = [];
  const answers: LiveAnswer[] = [];
  let isLosing = false;
  let crash = (): void => undefined;
  const client = createLiveClient(editor, ({ onAnswer, onCrash }) => {
    crash = () => {
      tasks.length = 0;
      onCrash('out of memory');
    };
    const worker = createLiveWorker({
      post(answer) {
        answers.push(answer);
        onAnswer(structuredClone(answer));
      },
      later: (task) => tasks.push(task),
    });
    return {
      post(request: LiveRequest) {
        if (isLosing && request.kind === 'patch') {
          isLosing = false;
          return;
        }
        worker.receive(structuredClone(request));
      },
      end() {},
    };
  });
  client.setView(view);
  client.start();
  const desk: LiveDesk = {
    client,
    answers,
    loseNext: () => void (isLosing = true),
    crash: () => crash(),
    run(pieces) {
      for (let i = 0; i < pieces && tasks.length > 0; i++) tasks.shift()!();
      return desk;
    },
    settle: () => desk.run(1e6),
    result() {
      const { result } = client.state.getState();
      if (!result) throw new Error('no result yet');
      return result;
    },
  };
  return desk;
}
