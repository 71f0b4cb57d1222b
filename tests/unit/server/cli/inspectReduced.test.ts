import path from 'node:path';
import { inspect } from '@/server/cli/inspect';

const EXAMPLES = path.join(__dirname, '../../../golden/fixtures/examples');

test('inspect says what the peak was, what lowering it reached and what it costs', async () => {
  const outcome = await inspect({ document: path.join(EXAMPLES, 'peak-clip.combwright.json') });
  const text = outcome.lines.join('\n');
  expect(text).toMatch(/PAPR +7\.\d\d dB over the frame/);
  expect(text).toMatch(/before lowering 12\.\d\d dB over the frame/);
  // the CCDF of both, the band and, where there is one, the notch
  expect(text.match(/CCDF +1 in 100 above \d\.\d\d dB, 1 in 1000 above \d+\.\d\d dB/g)).toHaveLength(2);
  expect(text.match(/spectrum +99 % of the power in \d+ Hz/g)).toHaveLength(2);
  const { papr, peakReduction } = outcome.json as unknown as {
    papr: { frameDb: number; atOneInThousandDb: number };
    peakReduction: { before: { atOneInThousandDb: number } };
  };
  expect(papr.atOneInThousandDb).toBeLessThanOrEqual(papr.frameDb);
  expect(papr.atOneInThousandDb).toBeLessThan(peakReduction.before.atOneInThousandDb - 1);
  expect(text).toMatch(
    /peak lowered +clip and filter, 6\.00 dB over the mean not reached, the best is 6\.\d\d dB, 4 passes/,
  );
  expect(text).toMatch(/its cost +EVM of the data 8\.\d+ %, gain fitted 8\.\d+ %, mean power -0\.\d\d dB/);
  expect(outcome.json).toMatchObject({
    peakReduction: {
      kind: 'clipAndFilter',
      targetPaprDb: 6,
      isReached: false,
      passes: 4,
      inks: [{ name: 'QPSK' }, { name: '64-QAM' }],
    },
  });
});

test('a document that lowers no peak says nothing of it', async () => {
  const outcome = await inspect({ document: path.join(EXAMPLES, 'peak-seed.combwright.json') });
  expect(outcome.json).toMatchObject({ peakReduction: null });
  expect(outcome.lines.join('\n')).not.toContain('lowered');
});
