import { createHash } from 'node:crypto';
import { createFileDownload } from '@/lib/client/fileDownload';

const bytes = Buffer.from(Array.from({ length: 5000 }, (_, i) => (i * i) % 251));
const sha256 = createHash('sha256').update(bytes).digest('hex');

const asked: Record<string, string>[] = [];
let answers: ((signal: AbortSignal) => Response | Promise<Response>)[];
const realFetch = globalThis.fetch;
beforeEach(() => {
  asked.length = 0;
  globalThis.fetch = (async (_address: string, init: { headers: Record<string, string>; signal: AbortSignal }) => {
    asked.push(init.headers);
    return answers.shift()!(init.signal);
  }) as never;
});
afterEach(() => void (globalThis.fetch = realFetch));

/** Part of the file; `breaks`: the line goes down at its end. */
function part(from: number, to: number, breaks: 'breaks' | 'ends' = 'ends', status = from === 0 ? 200 : 206) {
  return () => {
    let isSent = false;
    const body = new ReadableStream({
      pull(controller) {
        if (!isSent) controller.enqueue(new Uint8Array(bytes.subarray(from, to)));
        else if (breaks === 'breaks') controller.error(new TypeError('network'));
        else controller.close();
        isSent = true;
      },
    });
    return new Response(body, { status, headers: { ETag: '"one"' } });
  };
}

function wanted() {
  const saved: Blob[] = [];
  const download = createFileDownload({
    address: '/file',
    bytes: bytes.length,
    sha256,
    save: (file) => void saved.push(file),
  });
  return { download, saved, state: () => download.state.getState() };
}

it('hands out the whole file once its digest is right', async () => {
  answers = [part(0, 5000)];
  const { download, saved, state } = wanted();
  await download.start();
  expect(state()).toEqual({ kind: 'done' });
  expect(Buffer.from(await saved[0]!.arrayBuffer()).equals(bytes)).toBe(true);
});

it.each(['breaks', 'ends'] as const)('a line that %s half-way says where, and goes on from there', async (how) => {
  answers = [part(0, 2000, how), part(2000, 5000)];
  const { download, saved, state } = wanted();
  await download.start();
  expect(state()).toEqual({ kind: 'stopped', doneRatio: 0.4 });
  expect(saved).toHaveLength(0);
  await download.start();
  expect(asked).toEqual([{}, { Range: 'bytes=2000-', 'If-Range': '"one"' }]);
  expect(state()).toEqual({ kind: 'done' });
  expect(Buffer.from(await saved[0]!.arrayBuffer()).equals(bytes)).toBe(true);
});

it('begins again where the server sends the whole instead of the rest', async () => {
  answers = [part(0, 2000, 'breaks'), part(0, 5000)];
  const { download, saved, state } = wanted();
  await download.start();
  await download.start();
  expect(state()).toEqual({ kind: 'done' });
  expect(saved[0]!.size).toBe(5000);
});

it('another file than the proven one is not handed out', async () => {
  const other = Buffer.from(bytes);
  other[77]! ^= 1;
  answers = [() => new Response(other)];
  const { download, saved, state } = wanted();
  await download.start();
  expect([state().kind, saved.length]).toEqual(['different', 0]);
});

it('says why the server refuses, also half-way, and keeps nothing of it', async () => {
  const detail = 'Edition 1 was withdrawn: It splatters.';
  const problem = {
    type: 'urn:x',
    title: 'Withdrawn.',
    status: 409,
    detail,
    instance: 'urn:y',
    code: 'edition_withdrawn',
  };
  answers = [part(0, 2000, 'breaks'), () => new Response(JSON.stringify(problem), { status: 409 }), part(0, 5000)];
  const { download, saved, state } = wanted();
  await download.start();
  await download.start();
  expect(state()).toEqual({ kind: 'refused', words: detail });
  await download.start();
  expect(asked[2]).toEqual({});
  expect(saved).toHaveLength(1);
});

it('a cancelled one leaves nothing', async () => {
  answers = [
    (signal) => new Promise((_, reject) => signal.addEventListener('abort', () => reject(new Error('aborted')))),
    part(0, 5000),
  ];
  const { download, state } = wanted();
  const running = download.start();
  expect(state().kind).toBe('running');
  download.cancel();
  await running;
  expect(state()).toEqual({ kind: 'idle' });
  await download.start();
  expect(asked[1]).toEqual({});
});
