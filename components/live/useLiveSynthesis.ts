import { useEffect, useMemo } from 'react';
import { createLiveClient } from '@/lib/editor/live/client';
import type { LiveClient, LivePort, LivePortHandlers } from '@/lib/editor/live/client';
import type { LiveAnswer, LiveView } from '@/lib/editor/live/protocol';
import type { Editor } from '@/lib/editor/store';

/** The worker of the live views. The literal form of its address is what the bundler looks for. */
function startSynthWorker({ onAnswer, onCrash }: LivePortHandlers): LivePort {
  const worker = new Worker(new URL('./synth.worker.ts', import.meta.url));
  worker.onmessage = (event: MessageEvent<LiveAnswer>) => onAnswer(event.data);
  worker.onerror = (event) => {
    event.preventDefault();
    onCrash(event.message);
  };
  return { post: (request) => worker.postMessage(request), end: () => worker.terminate() };
}

/**
 * The live views of an editor: one worker while the component is mounted. The client's `state` store is read by narrow
 * selectors. `view` may be a new object at each render: it is sent when a value changed.
 */
export function useLiveSynthesis(editor: Editor, view: LiveView): LiveClient {
  const client = useMemo(() => createLiveClient(editor, startSynthWorker), [editor]);

  // Before the start, so that the first answer is of the right view.
  useEffect(() => client.setView(view), [client, view]);

  useEffect(() => {
    client.start();
    return () => client.end();
  }, [client]);

  return client;
}
