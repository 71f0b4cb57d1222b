import { execFile } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import fc from 'fast-check';
import type { WaveformContent } from '@/lib/synth';
import { arbitraryContent } from '../../../helpers/arbitraryContent';
import { renderSamples } from '../../../helpers/renderWords';

const DOCUMENTS = 40;
const SEED = 20260301;
/** Against long-double sums: double arithmetic over at most 14 transform levels leaves about −310 dB. */
const MOST_DIRECT_DB = -290;
/** Against NumPy's double transform, whose own error is of the same size. */
const MOST_WHOLE_DB = -285;

describe('random documents against an independent NumPy program', () => {
  it(`are the same signal (${DOCUMENTS} documents of up to 2^16 cells)`, async () => {
    // ten large, the rest small enough for many plain sums; silent ones say nothing
    const draw = (cellsMost: number, samplesMost: number, count: number, seed: number): WaveformContent[] =>
      fc
        .sample(arbitraryContent({ cellsMost, samplesMost }), { seed, numRuns: 3 * count })
        .filter((content) => renderSamples(content).some((part) => part !== 0))
        .slice(0, count);
    const contents = [...draw(65536, 150000, 10, SEED), ...draw(4096, 30000, DOCUMENTS - 10, SEED + 1)];
    const directory = mkdtempSync(join(tmpdir(), 'combwright-crosscheck-'));
    try {
      contents.forEach((content, i) => {
        writeFileSync(join(directory, `${i}.json`), JSON.stringify(content));
        const samples = renderSamples(content);
        writeFileSync(join(directory, `${i}.f64`), new Uint8Array(samples.buffer));
      });
      const script = join(__dirname, '../../generate/crosscheck.py');
      const { stdout } = await promisify(execFile)('/usr/bin/python3', [script, directory], { maxBuffer: 1 << 24 });
      const results = JSON.parse(stdout) as { samples: number; wholeDb: number; directDb: number }[];
      expect(results.length).toBe(DOCUMENTS);
      const bad = results
        .map((result, i) => ({ ...result, document: i }))
        .filter(({ wholeDb, directDb }) => !(wholeDb <= MOST_WHOLE_DB && directDb <= MOST_DIRECT_DB));
      expect(bad).toEqual([]);
    } finally {
      rmSync(directory, { recursive: true, force: true });
    }
  }, 240000);
});
