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
    // one large, the rest small enough for plain sums
    const large = fc.sample(arbitraryContent({ cellsMost: 65536, samplesMost: 120000 }), { seed: SEED, numRuns: 10 });
    const small = fc.sample(arbitraryContent({ cellsMost: 4096, samplesMost: 30000 }), {
      seed: SEED,
      numRuns: DOCUMENTS - 10,
    });
    const contents: WaveformContent[] = [...large, ...small];
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
