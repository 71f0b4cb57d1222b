import { fileRoles, manifestSchema, type Manifest } from '@/lib/document/manifestSchema';
import { parseManifest } from '@/lib/document/parse';

const digest = `sha256:${'0'.repeat(64)}`;
const evm = { cells: 1, evmPercent: 0.01, evmDb: -80 };

const manifest: Manifest = {
  format: 'combwright.manifest',
  version: 1,
  packKey: digest,
  state: 'released',
  edition: 3,
  digests: {
    contentDigest: digest,
    intentDigest: digest,
    documentDigest: digest,
    profileDigest: digest,
    profileFileDigest: digest,
    synthVersion: '1',
    packVersion: '1',
  },
  files: [{ name: 'two-tones-e3-00000000.sigmf-data', role: 'vector', bytes: 4, sha256: '0'.repeat(64) }],
  clock: {
    sampleClockFraction: ['40000000', '1'],
    sampleClockHz: 40e6,
    subcarrierSpacingFraction: ['100000', '1'],
    subcarrierSpacingHz: 100e3,
    frequencyOffsetHz: 0,
    offsetTurns: 0,
    closesLoop: true,
  },
  samples: {
    mode: 'loop',
    fftSize: 100,
    oversampling: 4,
    symbolCount: 1,
    repeats: 1,
    prefixSamples: [0],
    overlapSamples: 0,
    gapSamples: 0,
    padSamples: 0,
    repeatSamples: 400,
    activeSamples: 400,
    fileSamples: 400,
    durationSec: 1e-5,
  },
  word: {
    word: 'int16',
    bits: 16,
    align: 'right',
    shiftBits: 0,
    numberFormat: 'twosComplement',
    byteOrder: 'little',
    layout: 'interleaved',
    container: 'raw',
    swapIq: false,
    negateQ: false,
    bytesPerSample: 4,
    words: 'little-endian: the value 1 is stored 01 00',
    fullScale: 32767,
    scaleLsbPerUnit: 10000,
    scaleText: '10000.000000000000',
    firstWords: [1, -1],
    firstBytes: '01 00 ff ff',
  },
  levels: {
    reference: 'componentPeak',
    headroomDb: 1,
    fileRmsDbfs: -4,
    activeRmsDbfs: -4,
    renderedPeakDbfs: -1,
    renderedHeadroomDb: 1,
    reconstructedPeakDbfs: -1,
    reconstructedHeadroomDb: 1,
    reconstructedPeakMethod: 'exactTransforms',
    dcI: 0,
    dcQ: 0,
    dcDbfs: null,
    saturatedComponents: 0,
    saturatedSamples: 0,
  },
  papr: {
    frameDb: 3.01,
    activeFrameDb: null,
    meanPower: 0.02,
    meanOver: 'all repeats’ active spans',
    interpolation: 4,
    worstSymbolDb: 3.01,
    worstSymbol: 0,
    medianSymbolDb: 3.01,
  },
  symbols: [{ symbol: 0, startSample: 0, usefulStartSample: 0, prefixSamples: 0 }],
  ramp: { kind: 'none', rampSamples: 0, words: 'no ramp' },
  transform: { exponentSign: 1, scale: 0.1, words: '1/√N, e^{+j…}' },
  inks: [
    {
      inkId: 'k1',
      name: 'Tone',
      role: 'tone',
      powerDb: 0,
      cells: 2,
      streamId: null,
      map: null,
      factors: [],
      phaseDeg: 0,
      continuous: true,
    },
  ],
  streams: [],
  markers: [],
  proof: {
    samplesRead: 400,
    wordsCompared: 800,
    wordsDifferent: 0,
    ...evm,
    recipe: { cells: 'all used', channel: 'one gain', phaseTracking: 'none', window: 'after the prefix', bias: 'none' },
    inks: [{ inkId: 'k1', name: 'Tone', ...evm }],
    worstUnpaintedDbc: -90,
    worstUnpaintedSubcarrier: 7,
  },
  peakReduction: null,
  safety: ['A vector makes radio energy.'],
};

test('a manifest is read back as it was written', () => {
  expect(parseManifest(JSON.stringify(manifest))).toEqual({ ok: true, value: manifest });
});

test('its keys stand in their order', () => {
  const order =
    'format version packKey state edition digests files clock samples word levels papr symbols ramp transform inks streams markers proof peakReduction safety';
  expect(Object.keys(manifestSchema.shape).join(' ')).toBe(order);
  const shuffled = Object.fromEntries(Object.entries(manifest).reverse());
  const result = parseManifest(shuffled);
  expect(result.ok && Object.keys(result.value).join(' ')).toBe(order);
});

test('roles are those of a pack’s entries', () => {
  expect(fileRoles.join(' ')).toBe(
    'vector vectorI vectorQ meta markers payload reference referenceSent cells document bench card readme',
  );
});

test.each<[string, object]>([
  ['/colour', { colour: 'red' }],
  ['/packKey', { packKey: '0'.repeat(64) }],
  ['/edition', { edition: 0 }],
  ['/files/0/role', { files: [{ ...manifest.files[0], role: 'zip' }] }],
  ['/transform/exponentSign', { transform: { ...manifest.transform, exponentSign: -1 } }],
  ['/word/firstBytes', { word: { ...manifest.word, firstBytes: '0100ffff' } }],
  ['/levels/dcI', { levels: { ...manifest.levels, dcI: NaN } }],
  ['/clock/sampleClockFraction/1', { clock: { ...manifest.clock, sampleClockFraction: ['1', '0'] } }],
])('a wrong %s is refused', (pointer, change) => {
  expect(parseManifest({ ...manifest, ...change })).toMatchObject({ ok: false, issues: [{ pointer }] });
});
