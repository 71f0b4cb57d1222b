import { mostIssues, issuesOf } from '@/lib/document/issues';
import { parseBenchProfile, parseManifest, parseWaveformDocument } from '@/lib/document/parse';
import { waveformDocumentSchema } from '@/lib/document/waveformSchema';
import { openBench, smallDocument } from '@/tests/helpers/documents';

const text = JSON.stringify(smallDocument());
const rowsText = JSON.stringify(smallDocument().content.grid.rows);

function firstIssue(input: unknown) {
  const result = parseWaveformDocument(input);
  if (result.ok) throw new Error('accepted');
  return result.issues[0]!;
}

describe('a waveform document is read from', () => {
  const bytes = new TextEncoder().encode(text);
  test.each([
    ['text', text],
    ['bytes', bytes],
    ['a buffer', Buffer.from(bytes)],
    ['a value', JSON.parse(text)],
    ['bytes with a byte order mark', new Uint8Array([0xef, 0xbb, 0xbf, ...bytes])],
  ])('%s', (_name, input) => {
    expect(parseWaveformDocument(input)).toEqual({ ok: true, value: smallDocument() });
  });
});

describe('what is not one JSON document is malformed', () => {
  test.each<[string, unknown, string, RegExp]>([
    ['empty text', '', '', /is not JSON/],
    ['cut text', text.slice(0, -1), '', /is not JSON/],
    ['a comma too many', text.replace('"about"', ',"about"'), '', /is not JSON/],
    ['two values', `${text}${text}`, '', /is not JSON/],
    ['a closing bracket first', ']', '', /is not JSON/],
    ['wrong UTF-8', new Uint8Array([0x7b, 0xff, 0x7d]), '', /not UTF-8/],
    ['an overlong slash', new Uint8Array([0x22, 0xc0, 0xaf, 0x22]), '', /not UTF-8/],
    ['NaN', text.replace('"headroomDb":1', '"headroomDb":NaN'), '/content/level/headroomDb', /no NaN or Infinity/],
    ['Infinity', text.replace('"lossDb":0', '"lossDb":-Infinity'), '/intent/lossDb', /no NaN or Infinity/],
    ['a key twice', text.replace('"fftSize"', '"fftSize":1,"fftSize"'), '/content/fftSize', /stands twice/],
    [
      'a key twice, once escaped',
      text.replace('"fftSize"', '"\\u0066ftSize":1,"fftSize"'),
      '/content/fftSize',
      /stands twice/,
    ],
    [
      'a key twice in a list',
      text.replace('"inkId":"k1"', '"inkId":"k1","inkId":"k1"'),
      '/content/tray/1/inkId',
      /stands twice/,
    ],
    ['17 levels', '['.repeat(17), '', /deeper than 16/],
    ['a million levels', '[{"a":'.repeat(500_000), '', /deeper than 16/],
    ['300 keys', `{${Array.from({ length: 300 }, (_, at) => `"k${at}":0`).join()}}`, '', /more than 256 keys/],
  ])('%s', (_name, input, pointer, message) => {
    const issue = firstIssue(input);
    expect(issue).toMatchObject({ code: 'malformed', pointer });
    expect(issue.message).toMatch(message);
  });

  test('a string may hold what would be wrong outside', () => {
    const odd = smallDocument();
    odd.about.notes = 'NaN, Infinity, {"a":1,"a":2}, "quoted\\", [[[[[[[[[[[[[[[[[[[[ \u2028';
    expect(parseWaveformDocument(JSON.stringify(odd))).toEqual({ ok: true, value: odd });
  });
});

test('more than 32 MiB is too large, counted in bytes', () => {
  expect(firstIssue(' '.repeat(32 * 1024 * 1024 + 1))).toMatchObject({ code: 'too_large', pointer: '' });
  expect(firstIssue(`"${'ä'.repeat(16 * 1024 * 1024)}"`)).toMatchObject({ code: 'too_large', pointer: '' });
  expect(firstIssue(new Uint8Array(33 * 1024 * 1024))).toMatchObject({ code: 'too_large', pointer: '' });
  expect(firstIssue(' '.repeat(32 * 1024 * 1024))).toMatchObject({ code: 'malformed' });
});

describe('the gate of formats and versions', () => {
  test('a later version gets one sentence', () => {
    const result = parseWaveformDocument({ ...smallDocument(), version: 7, somethingNew: 1 });
    const message = 'This document has version 7. This installation reads up to 1.';
    expect(result).toEqual({ ok: false, issues: [{ code: 'invalid', pointer: '/version', message }], more: 0 });
  });
  test.each<[unknown, string, RegExp]>([
    [0, '/version', /must be 1/],
    ['1', '/version', /must be 1/],
    [1.5, '/version', /must be 1/],
  ])('version %p', (version, pointer, message) => {
    const issue = firstIssue({ ...smallDocument(), version });
    expect(issue.pointer).toBe(pointer);
    expect(issue.message).toMatch(message);
  });
  test('another kind of file is named', () => {
    expect(firstIssue(openBench())).toMatchObject({
      pointer: '/format',
      message: expect.stringMatching(/is a bench profile/),
    });
    expect(parseBenchProfile(smallDocument())).toMatchObject({ ok: false, issues: [{ pointer: '/format' }] });
    expect(parseManifest(smallDocument())).toMatchObject({ ok: false, issues: [{ pointer: '/format' }] });
    expect(firstIssue([])).toMatchObject({ pointer: '', message: expect.stringMatching(/must be an object/) });
    expect(firstIssue(null)).toMatchObject({ pointer: '' });
    expect(firstIssue(undefined)).toMatchObject({ pointer: '' });
  });
});

test('unknown keys are refused at every level, the one named __proto__ too', () => {
  const pointers = (input: unknown) => {
    const result = parseWaveformDocument(input);
    return result.ok ? [] : result.issues.map(({ pointer }) => pointer);
  };
  expect(pointers(text.replace('"format"', '"x":1,"format"'))).toEqual(['/x']);
  expect(pointers(text.replace('"title"', '"a/b~c":1,"title"'))).toEqual(['/about/a~1b~0c']);
  expect(pointers(text.replace('"mode"', '"__proto__":{},"mode"'))).toEqual(['/content/timing/__proto__']);
  expect(pointers(text.replace('"inkId":"k1"', '"inkId":"k1","colour":"red"'))).toEqual(['/content/tray/1/colour']);
  expect(pointers(text.replace('"kind":"alternating"', '"kind":"alternating","count":2'))).toEqual([
    '/content/tray/2/value/factors/0/sequence/count',
  ]);
});

describe('long lists of issues', () => {
  test('end at 50, the rest is counted', () => {
    const result = parseWaveformDocument(text.replace(rowsText, `[[${'0,64,'.repeat(500)}1,0]]`));
    expect(result).toMatchObject({ ok: false, more: 950 });
    if (!result.ok) {
      expect(result.issues).toHaveLength(mostIssues);
      expect(result.issues[1]).toEqual({
        code: 'invalid',
        pointer: '/content/grid/rows/0/1',
        message: 'must be an ink of 0 to 63',
      });
    }
  });

  // A body of 8 MB cost zod alone 9.6 s and 2.5 GB. Processor time, for a busy machine: it takes 0.2 s.
  test.each([
    ['one row of unmerged runs', `[[${'1,1,'.repeat(2 ** 21).slice(0, -1)}]]`],
    ['wrong runs', `[[${'-1,99,'.repeat(1_300_000).slice(0, -1)}]]`],
    ['rows of text', `[[${'"a",'.repeat(2_000_000).slice(0, -1)}]]`],
    ['full rows of unmerged runs', `[${`[${'1,1,'.repeat(63)}1,0],`.repeat(16384).slice(0, -1)}]`],
    [
      'rows alike but for the last run',
      `[${Array.from({ length: 16384 }, (_, at) => `[${'1,0,1,1,'.repeat(63)}${1 + at},2]`).join()}]`,
    ],
    ['too many objects', `[${'{},'.repeat(2_000_000).slice(0, -1)}]`],
  ])('8 MB of %s are answered at once', (_name, rows) => {
    const body = new TextEncoder().encode(text.replace(rowsText, rows));
    const before = process.memoryUsage().rss;
    const start = process.cpuUsage();
    const result = parseWaveformDocument(body);
    const { user, system } = process.cpuUsage(start);
    expect(result.ok).toBe(false);
    if (!result.ok) expect(result.issues.length).toBeLessThanOrEqual(mostIssues);
    expect((user + system) / 1e6).toBeLessThan(1);
    expect(process.memoryUsage().rss - before).toBeLessThan(400e6);
  });

  test.each([
    ['inks', (wrong: string) => text.replace('"tray":[', `"tray":[${wrong}`), '/content/tray'],
    ['streams', (wrong: string) => text.replace('"streams":[', `"streams":[${wrong}`), '/content/streams'],
    ['factors', (wrong: string) => text.replace('"factors":[', `"factors":[${wrong}`), '/content/tray/2/value/factors'],
  ])('a hundred thousand wrong %s are one issue', (_name, body, pointer) => {
    const result = parseWaveformDocument(body('{},'.repeat(100_000)));
    expect(result).toMatchObject({
      ok: false,
      more: 0,
      issues: [{ pointer, message: expect.stringMatching(/at most/) }],
    });
    if (!result.ok) expect(result.issues).toHaveLength(1);
  });
});

test('a schema used by itself gives the same issues', () => {
  const wrong = { ...smallDocument(), about: { title: '', notes: 5 }, intent: null };
  const parsed = waveformDocumentSchema.safeParse(wrong);
  expect(parsed.success ? null : issuesOf(parsed.error)).toEqual(parseWaveformDocument(wrong));
  expect(parseWaveformDocument(wrong)).toMatchObject({
    issues: [
      { pointer: '/about/title', message: 'must not be empty' },
      { pointer: '/about/notes', message: 'must be text' },
      { pointer: '/about/basedOn', message: 'is missing' },
      { pointer: '/intent', message: 'must be an object' },
    ],
  });
});
