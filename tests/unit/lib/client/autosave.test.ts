import { createAutosave } from '@/lib/client/autosave';
import type { CallAnswer } from '@/lib/client/apiClient';
import type { Problem } from '@/lib/contracts/problem';
import type { Revision, SaveAnswer } from '@/lib/contracts/waveforms';

jest.useFakeTimers();

const PERSON = { personId: '01HZZZZZZZZZZZZZZZZZZZZZZ2', name: 'Ines Okoro' };
const idOf = (number: number) => `01HZZZZZZZZZZZZZZZZZZZZ${100 + number}`;

function revisionOf(number: number): Revision {
  const digest = `sha256:${'0'.repeat(64)}`;
  return {
    waveformId: idOf(0),
    revisionId: idOf(number),
    number,
    parentId: null,
    savedBy: PERSON,
    savedAtMs: 1,
    title: 'Test',
    contentDigest: digest,
    intentDigest: digest,
    documentDigest: digest,
    isHead: true,
    isSide: false,
    stamp: { state: 'draft', editionNumber: null, reason: null, cameBack: null, atMs: 1, by: PERSON },
  };
}

const saved = (number: number): CallAnswer<SaveAnswer> => ({
  ok: true,
  value: { revision: revisionOf(number), isUnchanged: false, newer: null, openReview: null },
});

function problem(code: Problem['code'], status: number, facts?: Record<string, unknown>): CallAnswer<SaveAnswer> {
  return {
    ok: false,
    problem: { type: 'urn:test', title: code, status, detail: code, instance: 'r1', code, ...(facts ? { facts } : {}) },
  };
}

interface Sent {
  text: string;
  parentId: string;
  key: string;
}

function desk(answers: (CallAnswer<SaveAnswer> | Promise<CallAnswer<SaveAnswer>>)[]) {
  const sent: Sent[] = [];
  const local: (string | null)[] = [];
  let text = 'opened';
  let keys = 0;
  const saver = createAutosave({
    getSnapshot: () => text,
    send: (snapshot, parentId, key) => {
      sent.push({ text: snapshot, parentId, key });
      return Promise.resolve(answers.shift() ?? saved(99));
    },
    opened: revisionOf(1),
    keepLocal: (snapshot) => Promise.resolve(void local.push(snapshot)),
    dropLocal: () => Promise.resolve(void local.push(null)),
    newKey: () => `key${++keys}`,
    nowMs: () => 1000,
  });
  return {
    saver,
    sent,
    local,
    draw(next: string) {
      text = next;
      saver.touch();
    },
  };
}

test('saves two seconds after the last change, once, on the revision that was opened', async () => {
  const { saver, sent, draw } = desk([saved(2)]);
  draw('a');
  await jest.advanceTimersByTimeAsync(1500);
  draw('b');
  await jest.advanceTimersByTimeAsync(1900);
  expect(sent).toEqual([]);
  await jest.advanceTimersByTimeAsync(200);
  expect(sent).toEqual([{ text: 'b', parentId: idOf(1), key: 'key1' }]);
  expect(saver.state()).toEqual({ kind: 'saved', atMs: 1000 });
  expect(saver.revision().number).toBe(2);
});

test('what is drawn while a save is under way is saved after it, on the new revision', async () => {
  let answer!: (value: CallAnswer<SaveAnswer>) => void;
  const { saver, sent, draw } = desk([new Promise((resolve) => (answer = resolve)), saved(3)]);
  draw('a');
  await jest.advanceTimersByTimeAsync(2000);
  expect(saver.state().kind).toBe('saving');
  draw('b');
  await jest.advanceTimersByTimeAsync(5000);
  expect(sent).toHaveLength(1);
  answer(saved(2));
  await jest.advanceTimersByTimeAsync(2100);
  expect(sent[1]).toEqual({ text: 'b', parentId: idOf(2), key: 'key2' });
  expect(saver.state().kind).toBe('saved');
});

test('a retry after a lost answer carries the same key, so that it makes no second revision', async () => {
  const { saver, sent, draw } = desk([{ ok: false, problem: null }, saved(2)]);
  draw('a');
  await jest.advanceTimersByTimeAsync(2000);
  expect(saver.state().kind).toBe('offline');
  await jest.advanceTimersByTimeAsync(5000);
  expect(sent.map(({ key }) => key)).toEqual(['key1', 'key1']);
  expect(saver.state().kind).toBe('saved');
});

test('another drawing after a lost answer is another act with its own key', async () => {
  const { sent, draw } = desk([{ ok: false, problem: null }, saved(2)]);
  draw('a');
  await jest.advanceTimersByTimeAsync(2000);
  draw('b');
  await jest.advanceTimersByTimeAsync(6000);
  expect(sent.map(({ text, key }) => [text, key])).toEqual([
    ['a', 'key1'],
    ['b', 'key2'],
  ]);
});

test('after somebody saved first nothing is sent any more, whatever is drawn', async () => {
  const point = (number: number) => ({ revisionId: idOf(number), number, savedBy: PERSON, savedAtMs: 5 });
  const { saver, sent, draw } = desk([problem('stale_revision', 409, { newer: point(7), kept: point(8) })]);
  draw('a');
  await jest.advanceTimersByTimeAsync(2000);
  expect(saver.state()).toMatchObject({ kind: 'stale', facts: { newer: { number: 7 }, kept: { number: 8 } } });
  draw('b');
  await jest.advanceTimersByTimeAsync(60_000);
  expect(await saver.flush()).toBe(false);
  expect(sent).toHaveLength(1);
});

test('a refused drawing says why and is sent again when it changes', async () => {
  const { saver, sent, draw } = desk([problem('invalid', 422), saved(2)]);
  draw('a');
  await jest.advanceTimersByTimeAsync(2000);
  expect(saver.state()).toMatchObject({ kind: 'refused', problem: { code: 'invalid' } });
  await jest.advanceTimersByTimeAsync(60_000);
  expect(sent).toHaveLength(1);
  draw('b');
  await jest.advanceTimersByTimeAsync(2000);
  expect(saver.state().kind).toBe('saved');
});

test('leaving saves at once; with nothing changed nothing is sent', async () => {
  const { saver, sent, draw } = desk([saved(2)]);
  expect(await saver.flush(true)).toBe(true);
  expect(sent).toEqual([]);
  draw('a');
  expect(await saver.flush(true)).toBe(true);
  expect(sent.map(({ text }) => text)).toEqual(['a']);
});

test('the drawing is kept on this device before it is sent, and let go once the server has it', async () => {
  const { local, draw } = desk([{ ok: false, problem: null }, saved(2)]);
  draw('a');
  await jest.advanceTimersByTimeAsync(500);
  expect(local).toEqual(['a']);
  await jest.advanceTimersByTimeAsync(1600);
  expect(local).toEqual(['a']);
  await jest.advanceTimersByTimeAsync(5000);
  expect(local).toEqual(['a', null]);
});

test('a stopped saver keeps the last strokes on the device and sends nothing', async () => {
  const { saver, sent, local, draw } = desk([saved(2)]);
  draw('a');
  saver.stop();
  await jest.advanceTimersByTimeAsync(10_000);
  expect(sent).toEqual([]);
  expect(local).toEqual(['a']);
});
