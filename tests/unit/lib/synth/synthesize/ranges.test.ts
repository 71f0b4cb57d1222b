import fc from 'fast-check';
import {
  addLevelParts,
  collectLevelParts,
  createStatsCollector,
  createSynthesis,
  markerBytes,
  repeatCopies,
  vectorStats,
  type WaveformContent,
} from '@/lib/synth';
import { arbitraryContent } from '../../../../helpers/arbitraryContent';
import { openTestEngine } from '../../../../helpers/sampleEngine';
import { smallDocument } from '../../../../helpers/documents';

const engine = openTestEngine();
const bytesOf = (numbers: Float64Array): Buffer => Buffer.from(numbers.buffer, numbers.byteOffset, numbers.byteLength);

function wholeOf(content: WaveformContent): Float64Array {
  const synthesis = createSynthesis(content, { engine });
  const samples = new Float64Array(2 * synthesis.samples);
  for (let at = 0; at < samples.length;) at += 2 * synthesis.read(samples.subarray(at));
  return samples;
}

test.each([undefined, engine])(
  'from any sample on, a rendering has the bits that it has from the first (engine %#)',
  (own) => {
    fc.assert(
      fc.property(
        arbitraryContent(),
        fc.array(fc.tuple(fc.double({ min: 0, max: 1, noNaN: true }), fc.integer({ min: 1, max: 3000 })), {
          maxLength: 8,
        }),
        (content, places) => {
          const whole = wholeOf(content);
          const synthesis = createSynthesis(content, { engine: own });
          for (const [ratio, count] of places) {
            const from = Math.floor(ratio * synthesis.samples);
            synthesis.seek(from);
            expect(synthesis.position).toBe(from);
            const out = new Float64Array(2 * count);
            const got = synthesis.read(out);
            expect(got).toBe(Math.min(count, synthesis.samples - from));
            expect(bytesOf(out.subarray(0, 2 * got)).equals(bytesOf(whole.subarray(2 * from, 2 * (from + got))))).toBe(
              true,
            );
          }
        },
      ),
      { numRuns: 60, seed: 20261201 },
    );
  },
);

test('a place that is none is refused', () => {
  const synthesis = createSynthesis(smallDocument().content);
  for (const place of [-1, 0.5, synthesis.samples + 1]) expect(() => synthesis.seek(place)).toThrow('No such sample.');
});

test.each([undefined, engine])(
  'levels taken in stretches and added up are those of one collector (engine %#)',
  (own) => {
    fc.assert(
      fc.property(arbitraryContent(), fc.integer({ min: 1, max: 40 }), (content, parts) => {
        const synthesis = createSynthesis(content, { engine: own });
        const wanted = vectorStats(synthesis);
        const collector = createStatsCollector();
        const stretches = [];
        for (let at = 0; at < synthesis.samples; at += 128 * parts) {
          stretches.unshift(at); // measured from behind: a thread knows nothing of those before
        }
        const found = stretches.map((at) => {
          synthesis.seek(at);
          return collectLevelParts(synthesis, Math.min(128 * parts, synthesis.samples - at));
        });
        for (const one of found.reverse()) addLevelParts(collector, one);
        expect(collector.stats(wanted.activeSamples)).toEqual(wanted);
      }),
      { numRuns: 40, seed: 7 },
    );
  },
);

test('levels are taken in whole parts', () => {
  const synthesis = createSynthesis(smallDocument().content);
  expect(() => collectLevelParts(synthesis, 100)).toThrow('whole parts');
  synthesis.seek(64);
  expect(() => collectLevelParts(synthesis, 128)).toThrow('whole parts');
});

test('repeats that are called copies have the bits of the earlier ones', () => {
  let copies = 0;
  fc.assert(
    fc.property(
      arbitraryContent({ cellsMost: 256, samplesMost: 20000 }),
      fc.integer({ min: 2, max: 9 }),
      fc.boolean(),
      (drawn, repeats, closes) => {
        const timing = { ...drawn.timing, repeats };
        const content = { ...drawn, timing, frequencyOffsetHz: closes ? 0 : drawn.frequencyOffsetHz };
        const found = repeatCopies(content);
        if (found === null) return;
        copies++;
        const whole = wholeOf(content);
        const { repeatSamples } = createSynthesis(content).layout;
        const repeatAt = (r: number) => bytesOf(whole.subarray(2 * r * repeatSamples, 2 * (r + 1) * repeatSamples));
        for (let r = found.firstAlike + found.period; r < repeats; r++)
          expect([r, repeatAt(r).equals(repeatAt(r - found.period))]).toEqual([r, true]);
      },
    ),
    { numRuns: 200, seed: 20261201 },
  );
  expect(copies).toBeGreaterThan(50);
});

describe('how many repeats make a copy', () => {
  const of = (overrides: Partial<WaveformContent>) => repeatCopies(smallDocument(overrides).content);
  const repeats = (count: number, more: object = {}) => ({
    mode: 'loop' as const,
    repeats: count,
    gapSamples: 0,
    padSamples: 0,
    ...more,
  });
  const { streams } = smallDocument().content;

  test('payloads that restart: each is the first', () => {
    expect(of({ timing: repeats(3) })).toEqual({ firstAlike: 0, period: 1 });
    expect(of({ timing: repeats(1) })).toBeNull();
  });

  test('with overlap, the first repeat of a burst has no suffix before it', () => {
    expect(of({ overlapSamples: 4, timing: repeats(3, { mode: 'burst' }) })).toEqual({ firstAlike: 1, period: 1 });
    expect(of({ overlapSamples: 4, timing: repeats(2, { mode: 'burst' }) })).toBeNull();
    expect(of({ overlapSamples: 4, timing: repeats(3, { mode: 'burst', gapSamples: 4 }) })).toMatchObject({
      firstAlike: 0,
    });
    expect(of({ overlapSamples: 4, timing: repeats(3) })).toMatchObject({ firstAlike: 0 });
    expect(of({ overlapSamples: 4, timing: repeats(3, { padSamples: 2 }) })).toMatchObject({ firstAlike: 1 });
  });

  test('payloads that continue: after as many repeats as bring the source round', () => {
    const pattern = {
      ...streams[0]!,
      acrossRepeats: 'continue' as const,
      source: { kind: 'pattern' as const, bits: '11000' },
    };
    // anchored: 12·4·64 = 3072 bits a repeat, 2 modulo 5
    expect(of({ streams: [pattern], timing: repeats(9) })).toEqual({ firstAlike: 0, period: 5 });
    expect(of({ streams: [pattern], timing: repeats(5) })).toBeNull();
  });

  test('an offset: where its turns are whole and stand at the same place between two exact ones', () => {
    // 320 samples a repeat at 20 MHz: 62.5 kHz is one turn a repeat, and 16 repeats are 5 · 1024 samples
    expect(of({ frequencyOffsetHz: 62500, timing: repeats(20) })).toEqual({ firstAlike: 0, period: 16 });
    const whole = wholeOf(smallDocument({ frequencyOffsetHz: 62500, timing: repeats(20) }).content);
    expect(bytesOf(whole.subarray(0, 2560)).equals(bytesOf(whole.subarray(10240, 12800)))).toBe(true);
    expect(bytesOf(whole.subarray(0, 2560)).equals(bytesOf(whole.subarray(640, 3200)))).toBe(false);
    expect(of({ frequencyOffsetHz: 62500, timing: repeats(16) })).toBeNull();
    expect(of({ frequencyOffsetHz: 62501, timing: repeats(65536) })).toBeNull();
  });
});

test('marker bytes from any sample on are those of the whole file', () => {
  fc.assert(
    fc.property(
      arbitraryContent(),
      fc.array(fc.tuple(fc.double({ min: 0, max: 1, noNaN: true }), fc.integer({ min: 1, max: 999 })), {
        maxLength: 6,
      }),
      (content, places) => {
        const source = markerBytes(content);
        const whole = new Uint8Array(source.samples);
        source.read(whole);
        for (const [ratio, count] of places) {
          const from = Math.floor(ratio * source.samples);
          source.seek(from);
          const out = new Uint8Array(count).fill(255);
          const got = source.read(out);
          expect(Buffer.compare(out.subarray(0, got), whole.subarray(from, from + got))).toBe(0);
        }
      },
    ),
    { numRuns: 60, seed: 5 },
  );
});
