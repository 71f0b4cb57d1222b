import type { WaveformContent } from '@/lib/synth/index';
import { issuesAfter, type Edit } from '@/tests/helpers/documentIssues';

const sequence =
  (value: unknown): Edit =>
  (content) => {
    content.tray[2].value.factors[0].sequence = value;
  };
const source =
  (value: unknown): Edit =>
  (content) => {
    content.streams[0].source = value;
  };
const pn = { kind: 'pn', stages: 9, taps: [5, 9], seed: 511, inverted: false };
const tone = {
  inkId: 'k3',
  name: 'Tone',
  role: 'tone',
  powerDb: 0,
  value: { factors: [], phaseDeg: 0, continuous: true },
};
const marker = { name: 'Trigger', at: 'file', symbol: null, offsetSamples: 0, lengthSamples: 1 };
const markers =
  (...list: object[]): Edit =>
  (content) => {
    content.markers = list.map((one) => ({ ...marker, ...one }));
  };
const burst =
  (more: Edit): Edit =>
  (content, document) => {
    content.timing.mode = 'burst';
    more(content, document);
  };

/** Spreads the small grid over another N and L: one bare row. */
const bare =
  (fftSize: number, symbolCount: number, more: Edit = () => undefined): Edit =>
  (content, document) => {
    content.fftSize = fftSize;
    content.symbolCount = symbolCount;
    content.grid = { rows: [[fftSize, 0]], rowOfSymbol: new Array(symbolCount).fill(0) };
    content.prefixSamples = [0];
    more(content, document);
  };

test.each<[string, Edit]>([
  ['the least size', bare(16, 1)],
  ['a size of 3 and 5', bare(3 ** 2 * 5 ** 3, 2)],
  ['the most symbols', bare(512, 16384)],
  ['the largest size', bare(16384, 512)],
  ['a fraction', (content) => (content.subcarrierSpacingHz = [3125000, 7])],
  ['the highest spacing', (content) => (content.subcarrierSpacingHz = [1e9, 1])],
  ['the least spacing', (content) => (content.subcarrierSpacingHz = [1, Number.MAX_SAFE_INTEGER])],
  ['a prefix as long as the symbol', (content) => (content.prefixSamples = [64, 0, 64, 3])],
  ['an overlap as long as the prefix', (content) => (content.overlapSamples = 16)],
  ['the highest offset', (content) => (content.frequencyOffsetHz = 10e6)],
  ['the lowest offset', (content) => (content.frequencyOffsetHz = -10e6)],
  ['the smallest offset', (content) => (content.frequencyOffsetHz = 5e-324)],
  ['no streams', (content) => ((content.streams = []), (content.tray[1] = { ...content.tray[2], inkId: 'k1' }))],
  ['one listed point', sequence({ kind: 'listed', points: [[0, -100]] })],
  ['a Zadoff–Chu sequence', sequence({ kind: 'zadoffChu', length: 65536, root: 65535, shift: 65535 })],
  ['31 stages', sequence({ ...pn, stages: 31, taps: [28, 31], seed: 2 ** 31 - 1 })],
  ['13 bits', source({ kind: 'uploaded', name: 'barker', bitCount: 13, base64: '+ag=' })],
  ['one bit', source({ kind: 'uploaded', name: 'one', bitCount: 1, base64: 'gA==' })],
  ['three bytes', source({ kind: 'uploaded', name: 'three', bitCount: 24, base64: '////' })],
  ['4096 pattern bits', source({ kind: 'pattern', bits: '01'.repeat(2048) })],
  ['a marker that wraps in a loop', markers({ offsetSamples: -5, lengthSamples: 2 ** 31 })],
  ['a marker at each symbol', burst(markers({ at: 'symbol', offsetSamples: 0, lengthSamples: 80 }))],
  ['a marker to the end of a burst', burst(markers({ offsetSamples: 319 }))],
  [
    'a marker in a burst’s tail',
    burst((content, document) => ((content.overlapSamples = 4), markers({ offsetSamples: 323 })(content, document))),
  ],
  ['a tone', (content) => content.tray.push(tone)],
  [
    'peak reduction',
    (content) => (content.peakReduction = { kind: 'clipAndFilter', targetPaprDb: 3, iterations: 1000 }),
  ],
  ['a name of 60 characters beyond the basic plane', (content) => (content.tray[1].name = '𝄞'.repeat(60))],
  [
    'an unpainted ink that could not be painted',
    (content) =>
      content.tray.push({
        ...structuredClone(content.tray[2]),
        inkId: 'k3',
        value: { factors: [{ sequence: { kind: 'constant' }, counter: 'cell', start: -1 }] },
      }),
  ],
  [
    'a subcarrier counter that ends at 0',
    (content) => Object.assign(content.tray[2].value.factors[0], { counter: 'subcarrier', start: -11 }),
  ],
])('accepts %s', (_name, edit) => {
  expect(issuesAfter(edit)).toEqual([]);
});

test.each<[name: string, pointer: string, message: RegExp, edit: Edit]>([
  ['a size of 7s', '/content/fftSize', /2, 3 and 5: 48 and 50 are the nearest/, bare(49, 1)],
  ['a size too small', '/content/fftSize', /at least 16/, (content) => (content.fftSize = 15)],
  ['a size too large', '/content/fftSize', /at most 16384/, (content) => (content.fftSize = 16385)],
  ['too many cells', '/content/symbolCount', /at most 512 with 16384/, bare(16384, 513)],
  [
    'a fraction not reduced',
    '/content/subcarrierSpacingHz',
    /factor 3/,
    (content) => (content.subcarrierSpacingHz = [15, 6]),
  ],
  [
    'a fraction of 0',
    '/content/subcarrierSpacingHz/0',
    /at least 1/,
    (content) => (content.subcarrierSpacingHz = [0, 1]),
  ],
  [
    'a fraction over 1 GHz',
    '/content/subcarrierSpacingHz',
    /at most 1 GHz/,
    (content) => (content.subcarrierSpacingHz = [9007199254740991, 9007199]),
  ],
  [
    'a fraction of three',
    '/content/subcarrierSpacingHz',
    /list|entries/,
    (content) => (content.subcarrierSpacingHz = [1, 1, 1]),
  ],
  [
    'more prefixes than symbols',
    '/content/prefixSamples',
    /4 symbols, not 5/,
    (content) => (content.prefixSamples = [1, 1, 1, 1, 1]),
  ],
  ['no prefix', '/content/prefixSamples', /at least 1/, (content) => (content.prefixSamples = [])],
  [
    'a prefix over N',
    '/content/prefixSamples/1',
    /at most the FFT size, 64/,
    (content) => (content.prefixSamples = [0, 65]),
  ],
  ['a prefix of −0', '/content/prefixSamples/0', /whole number/, (content) => (content.prefixSamples = [-0])],
  [
    'an overlap over the shortest prefix',
    '/content/overlapSamples',
    /shortest prefix, 3/,
    (content) => ((content.prefixSamples = [16, 3]), (content.overlapSamples = 4)),
  ],
  [
    'an offset over half the clock',
    '/content/frequencyOffsetHz',
    /±10000000 Hz/,
    (content) => (content.frequencyOffsetHz = 10000000.000000002),
  ],
  ['an endless offset', '/content/frequencyOffsetHz', /finite/, (content) => (content.frequencyOffsetHz = -Infinity)],
  ['an offset of −0', '/content/frequencyOffsetHz', /not −0/, (content) => (content.frequencyOffsetHz = -0)],
  ['half a repeat', '/content/timing/repeats', /whole number/, (content) => (content.timing.repeats = 1.5)],
  ['a bad mode', '/content/timing/mode', /"loop", "burst"/, (content) => (content.timing.mode = 'once')],
  ['an ink out of place', '/content/tray/1/inkId', /"k1"/, (content) => (content.tray[1].inkId = 'k2')],
  [
    'ink 0 with a role',
    '/content/tray/0/role',
    /"null"/,
    (content) => (content.tray[0] = { ...content.tray[2], inkId: 'k0' }),
  ],
  [
    'a null ink with power',
    '/content/tray/0/powerDb',
    /at (most|least) 0/,
    (content) => (content.tray[0].powerDb = -3),
  ],
  ['a role nobody knows', '/content/tray/1/role', /one of "null"/, (content) => (content.tray[1].role = 'guard')],
  ['an empty name', '/content/tray/1/name', /empty/, (content) => (content.tray[1].name = '')],
  ['a name of 61', '/content/tray/1/name', /at most 60/, (content) => (content.tray[1].name = 'a'.repeat(61))],
  ['a name with a line break', '/content/tray/1/name', /control/, (content) => (content.tray[1].name = 'a\nb')],
  ['a name not in NFC', '/content/streams/0/name', /NFC/, (content) => (content.streams[0].name = 'Cafe\u0301')],
  ['half a surrogate pair', '/about/title', /surrogate/, (_content, document) => (document.about.title = '\ud834')],
  [
    'a stream that is not there',
    '/content/tray/1/value/streamId',
    /s0 to s0/,
    (content) => (content.tray[1].value.streamId = 's1'),
  ],
  ['a stream out of place', '/content/streams/0/streamId', /"s0"/, (content) => (content.streams[0].streamId = 's1')],
  [
    'a map that a constellation has not',
    '/content/tray/1/value/bitMap',
    /ts38211 or ieee80211/,
    (content) => Object.assign(content.tray[1].value, { constellation: '256qam', bitMap: 'en300744' }),
  ],
  [
    'π/2-BPSK of another map',
    '/content/tray/1/value/bitMap',
    /use ts38211/,
    (content) => Object.assign(content.tray[1].value, { constellation: 'pi2-bpsk', bitMap: 'ieee80211' }),
  ],
  ['a power over 20 dB', '/content/tray/1/powerDb', /at most 20/, (content) => (content.tray[1].powerDb = 20.5)],
  [
    'a pilot without factors',
    '/content/tray/2/value/factors',
    /at least 1 entry/,
    (content) => (content.tray[2].value.factors = []),
  ],
  [
    'four factors',
    '/content/tray/2/value/factors',
    /at most 3/,
    (content) => (content.tray[2].value.factors = new Array(4).fill(content.tray[2].value.factors[0])),
  ],
  [
    'a tone that counts symbols',
    '/content/tray/3/value/factors/0/counter',
    /symbolCell or subcarrier/,
    (content) =>
      content.tray.push({
        ...tone,
        value: { ...tone.value, factors: [{ sequence: { kind: 'constant' }, counter: 'symbol', start: 0 }] },
      }),
  ],
  [
    'taps that do not ascend',
    '/content/tray/2/value/factors/0/sequence/taps',
    /ascend/,
    sequence({ ...pn, taps: [9, 5] }),
  ],
  ['a tap twice', '/content/tray/2/value/factors/0/sequence/taps', /each tap once/, sequence({ ...pn, taps: [9, 9] })],
  [
    'taps that do not end in the stages',
    '/content/tray/2/value/factors/0/sequence/taps',
    /stages, 9/,
    sequence({ ...pn, taps: [5, 8] }),
  ],
  [
    'a seed of more bits',
    '/content/tray/2/value/factors/0/sequence/seed',
    /at most 511/,
    sequence({ ...pn, seed: 512 }),
  ],
  ['a seed of 0', '/content/tray/2/value/factors/0/sequence/seed', /at least 1/, sequence({ ...pn, seed: 0 })],
  [
    'a root with a common factor',
    '/content/tray/2/value/factors/0/sequence/root',
    /in common/,
    sequence({ kind: 'zadoffChu', length: 12, root: 9, shift: 0 }),
  ],
  [
    'a shift of the length',
    '/content/tray/2/value/factors/0/sequence/shift',
    /less than the length, 7/,
    sequence({ kind: 'zadoffChu', length: 7, root: 1, shift: 7 }),
  ],
  [
    'a listed −0',
    '/content/tray/2/value/factors/0/sequence/points/1',
    /two numbers/,
    sequence({
      kind: 'listed',
      points: [
        [0, 1],
        [-0, 1],
      ],
    }),
  ],
  [
    'a listed point of three',
    '/content/tray/2/value/factors/0/sequence/points/0',
    /two numbers/,
    sequence({ kind: 'listed', points: [[0, 1, 0]] }),
  ],
  [
    'no listed points',
    '/content/tray/2/value/factors/0/sequence/points',
    /at least 1/,
    sequence({ kind: 'listed', points: [] }),
  ],
  [
    'a Gold payload with points',
    '/content/streams/0/source/points',
    /no key/,
    source({ kind: 'gold', cInit: 1, points: 'bpsk' }),
  ],
  [
    'a pattern of letters',
    '/content/streams/0/source/bits',
    /digits 0 and 1/,
    source({ kind: 'pattern', bits: '01a' }),
  ],
  [
    'base64 without padding',
    '/content/streams/0/source/base64',
    /must have 4 characters/,
    source({ kind: 'uploaded', name: 'x', bitCount: 13, base64: '+ag' }),
  ],
  [
    'base64 with an unused bit of the last byte',
    '/content/streams/0/source/base64',
    /unused last bits 0/,
    source({ kind: 'uploaded', name: 'x', bitCount: 12, base64: '+ag=' }),
  ],
  [
    'base64 with a bit beyond the last byte',
    '/content/streams/0/source/base64',
    /unused last bits 0/,
    source({ kind: 'uploaded', name: 'x', bitCount: 13, base64: '+ah=' }),
  ],
  [
    'base64 with an unused bit two characters back',
    '/content/streams/0/source/base64',
    /unused last bits 0/,
    source({ kind: 'uploaded', name: 'x', bitCount: 1, base64: 'oA==' }),
  ],
  [
    'base64 of the URL alphabet',
    '/content/streams/0/source/base64',
    /wrong character at place 1/,
    source({ kind: 'uploaded', name: 'x', bitCount: 13, base64: '-ag=' }),
  ],
  [
    'base64 with padding inside',
    '/content/streams/0/source/base64',
    /wrong character at place 3/,
    source({ kind: 'uploaded', name: 'x', bitCount: 24, base64: '+a=g' }),
  ],
  [
    'no uploaded bits',
    '/content/streams/0/source/bitCount',
    /at least 1/,
    source({ kind: 'uploaded', name: 'x', bitCount: 0, base64: '' }),
  ],
  [
    'runs that do not fill',
    '/content/grid/rows/0',
    /fill 64 subcarriers, not 63/,
    (content) => (content.grid.rows = [[63, 0]]),
  ],
  ['runs not merged', '/content/grid/rows/0/3', /merge/, (content) => (content.grid.rows = [[32, 1, 32, 1]])],
  ['an empty run', '/content/grid/rows/0/0', /length of 1/, (content) => (content.grid.rows = [[0, 1, 64, 0]])],
  ['half a run', '/content/grid/rows/0', /pairs/, (content) => (content.grid.rows = [[64, 0, 1]])],
  ['an ink that is not in the tray', '/content/grid/rows/0/1', /0 to 2/, (content) => (content.grid.rows = [[64, 3]])],
  [
    'a row twice',
    '/content/grid/rows/2',
    /same as row 0/,
    (content) =>
      (content.grid = {
        rows: [
          [64, 0],
          [64, 1],
          [64, 0],
        ],
        rowOfSymbol: [0, 1, 2, 2],
      }),
  ],
  ['a row nobody uses', '/content/grid/rows/1', /used by no symbol/, (content) => content.grid.rows.push([64, 1])],
  [
    'rows not in order of first use',
    '/content/grid/rowOfSymbol/0',
    /order of first use/,
    (content) =>
      (content.grid = {
        rows: [
          [64, 0],
          [64, 1],
        ],
        rowOfSymbol: [1, 0, 0, 0],
      }),
  ],
  ['a row that is not there', '/content/grid/rowOfSymbol/3', /0 to 0/, (content) => (content.grid.rowOfSymbol[3] = 1)],
  ['too few symbols', '/content/grid/rowOfSymbol', /4 symbols, not 3/, (content) => content.grid.rowOfSymbol.pop()],
  ['a row index of −0', '/content/grid/rowOfSymbol/1', /0 or more/, (content) => (content.grid.rowOfSymbol[1] = -0)],
  ['rows that are no list', '/content/grid/rows', /must be a list/, (content) => (content.grid.rows = { length: 1 })],
  ['a marker with a symbol at the file', '/content/markers/0/symbol', /must be null/, markers({ symbol: 0 })],
  ['a marker at a symbol beyond', '/content/markers/0/symbol', /0 to 3/, markers({ at: 'symbol', symbol: 4 })],
  [
    'a marker before a burst',
    '/content/markers/0/offsetSamples',
    /start 1 samples before/,
    burst(markers({ offsetSamples: -1 })),
  ],
  [
    'a marker past a burst',
    '/content/markers/0/lengthSamples',
    /end 1 samples past/,
    burst(markers({ offsetSamples: 320 })),
  ],
  [
    'a repeat marker past a burst',
    '/content/markers/0/lengthSamples',
    /end 80 samples past/,
    burst(markers({ at: 'repeat', lengthSamples: 400 })),
  ],
  [
    'a symbol marker past a burst',
    '/content/markers/0/lengthSamples',
    /end 1 samples past/,
    burst(markers({ at: 'symbol', lengthSamples: 81 })),
  ],
  ['five markers', '/content/markers', /at most 4/, markers({}, {}, {}, {}, {})],
  [
    'a target PAPR of 2 dB',
    '/content/peakReduction/targetPaprDb',
    /at least 3/,
    (content) => (content.peakReduction = { kind: 'toneReservation', targetPaprDb: 2, iterations: 1 }),
  ],
  [
    'iterations of none',
    '/content/peakReduction/iterations',
    /no key/,
    (content) => (content.peakReduction.iterations = 1),
  ],
  ['headroom below 0', '/content/level/headroomDb', /at least 0/, (content) => (content.level.headroomDb = -1)],
  ['loss over 200 dB', '/intent/lossDb', /at most 200/, (_content, document) => (document.intent.lossDb = 201)],
  [
    'a tolerance of nothing',
    '/intent/levelToleranceDb',
    /missing/,
    (_content, document) => delete document.intent.levelToleranceDb,
  ],
  ['a title of 121', '/about/title', /at most 120/, (_content, document) => (document.about.title = 'a'.repeat(121))],
])('refuses %s', (_name, pointer, message, edit) => {
  const issues = issuesAfter(edit);
  expect(issues.map((issue) => issue.pointer)).toContain(pointer);
  const issue = issues.find((one) => one.pointer === pointer)!;
  expect(issue.message).toMatch(message);
  expect(issue.code).toBe('invalid');
});

test('holes of a sparse list are no entries', () => {
  const holes = (length: number) => new Array<number>(length);
  expect(issuesAfter((content) => (content.prefixSamples = holes(2)))).toHaveLength(2);
  expect(issuesAfter((content) => (content.grid.rowOfSymbol = holes(4)))).toHaveLength(4);
  expect(issuesAfter((content) => (content.grid.rows = holes(1)))).toHaveLength(1);
  expect(issuesAfter((content) => (content.grid.rows = [holes(2)]))).toHaveLength(2);
  expect(issuesAfter((content) => (content.tray[2].value.factors = holes(1)))).toHaveLength(1);
  expect(issuesAfter(sequence({ kind: 'listed', points: holes(1) }))).toHaveLength(1);
});

test('a file over 2^33 samples is too large; one of 2^33 is not', () => {
  const sized = (padSamples: number): Edit =>
    bare(64, 4, (content: WaveformContent) => {
      content.oversampling = 16;
      content.timing = { mode: 'loop', repeats: 65535, gapSamples: 7936, padSamples };
    });
  const most = 2 ** 33 - 65535 * (64 * 4 + 7936) * 16;
  expect(most).toBeGreaterThanOrEqual(0);
  expect(issuesAfter(sized(most))).toEqual([]);
  expect(issuesAfter(sized(most + 1))).toEqual([
    { code: 'too_large', pointer: '/content/timing', message: expect.stringContaining('8589934593 samples') },
  ]);
  const inBurst: Edit = (content, document) => {
    sized(most)(content, document);
    content.timing.mode = 'burst';
    content.prefixSamples = [0];
  };
  expect(issuesAfter(inBurst)).toEqual([]);
});
