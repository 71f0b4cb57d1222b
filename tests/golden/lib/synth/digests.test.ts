import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex } from '@noble/hashes/utils.js';
import { synthVersion, type BenchProfile, type WaveformDocument } from '@/lib/synth';
import { goldenBytes, type GoldenKind } from '../../../helpers/goldenOutputs';

// Source: this product's own arithmetic, version by version (generate/digests.mjs): any change of a bit shows here. That the
// words are right is held by examples.test.ts, against an independent program.
const FIXTURES = join(__dirname, '../../fixtures');
const read = (name: string): unknown => JSON.parse(readFileSync(join(FIXTURES, name), 'utf8'));
const golden = read('digests.json') as { synthVersion: number; digests: Record<string, Record<GoldenKind, string>> };
const bench = (read('examples/int16.bench.json') as BenchProfile).content;

describe(`outputs of synthVersion ${golden.synthVersion}`, () => {
  it('belong to the version in use', () => {
    expect(synthVersion).toBe(golden.synthVersion);
  });

  it.each(Object.entries(golden.digests))('%s has the same bits as ever', (name, digests) => {
    const { content } = read(`examples/${name}.combwright.json`) as WaveformDocument;
    for (const [kind, digest] of Object.entries(digests)) {
      expect([kind, bytesToHex(sha256(goldenBytes(content, bench, kind as GoldenKind)))]).toEqual([kind, digest]);
    }
  });
});
