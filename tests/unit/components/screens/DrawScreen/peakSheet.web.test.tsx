import { fireEvent, render, screen, within } from '@testing-library/react';
import { PeakWay } from '@/components/screens/DrawScreen/peak/PeakWay';
import {
  askOf,
  axisOf,
  costLine,
  costRows,
  firstBlanks,
  missingFor,
  seededStreams,
  verdictOf,
} from '@/components/screens/DrawScreen/peak/peakWords';
import { createPeakJob, type PeakAsk } from '@/lib/editor/live/peakJob';
import type { WaveformContent } from '@/lib/synth';
import { NULL_INK, dataInk, factor, pilotInk, pnStream, rowOf, smallContent } from '../../../../helpers/content';

const content: WaveformContent = smallContent({
  symbolCount: 2,
  tray: [
    NULL_INK,
    dataInk(1, { constellation: '16qam', bitMap: 'ts38211', streamId: 's0' }),
    pilotInk(2, [factor({ kind: 'constant' })]),
    { inkId: 'k3', name: 'reserved', role: 'reserved', powerDb: 0, value: null },
  ],
  streams: [pnStream(0)],
  grid: {
    rows: [rowOf(64, (k) => (Math.abs(k) > 24 ? 0 : k % 6 === 0 ? 2 : k % 11 === 5 ? 3 : 1))],
    rowOfSymbol: [0, 0],
  },
});
const cells = [30, 70, 16, 12];

function tried(ask: PeakAsk, of = content) {
  const job = createPeakJob(of, ask);
  while (job.step());
  return job.result();
}

describe('words', () => {
  it('say the verdict, the cost and the best that was found', () => {
    expect(verdictOf(9.05, 9.5)).toEqual({ words: 'meets 9.5', isMet: true });
    expect(verdictOf(9.87, 9.5)).toEqual({ words: 'over by 0.37', isMet: false });
    const clip = tried({ way: 'clipAndFilter', targetPaprDb: 3, iterations: 2 });
    expect(costLine(clip, content)).toMatch(
      /^Changes the data cells: EVM \d+\.\d\d %\. Pilots and tones stay\. Target 3 not reached: \d\.\d\d is the best\.$/,
    );
    const tone = tried({ way: 'toneReservation', targetPaprDb: 20, iterations: 2 });
    expect(costLine(tone, content)).toBe('Fills 0 reserved cells: mean 0.00 dB.');
    const filled = tried({ way: 'toneReservation', targetPaprDb: 4, iterations: 5 });
    expect(costLine(filled, content)).toMatch(
      /^Fills \d+ reserved cells: mean \+\d\.\d\d dB, one cell [+−]\d+\.\d dB\./,
    );
    const seed = tried({ way: 'seed', streamId: 's0', first: 5, count: 3 });
    expect(costLine(seed, content)).toMatch(
      /^(Seed [567], the best of 3\. The bits change, EVM 0\.|No better seed in 3 tries\.)$/,
    );
    const best = { ...content, ...seed.change };
    expect(costLine(tried({ way: 'seed', streamId: 's0', first: 5, count: 3 }, best), best)).toBe(
      'No better seed in 3 tries.',
    );
    expect(costLine(tried({ way: 'phases' }), content)).toMatch(/^(Newman|Schroeder) on 18 cells\. EVM 0\.|^No better/);
  });

  it('say what a way misses', () => {
    const only = (...kept: number[]) => cells.map((count, ink) => (kept.includes(ink) ? count : 0));
    expect(missingFor('toneReservation', content, only(1))).toBe('No reserved cells. Paint some first.');
    expect(missingFor('phases', content, only(1))).toBe('No pilots and no tones. Paint some first.');
    expect(missingFor('clipAndFilter', content, only(2))).toMatch(/^No data cells/);
    expect(missingFor('seed', { ...content, streams: [{ ...pnStream(0), source: { kind: 'ones' } }] }, cells)).toMatch(
      /^No payload/,
    );
    expect(missingFor('seed', content, cells)).toBeNull();
    expect(seededStreams(content, cells)).toMatchObject([{ streamId: 's0', least: 1, most: 8388607 }]);
  });

  it('list the cost in full, with the inks that differ most', () => {
    const now = tried({ way: 'now' }).figures;
    const rows = costRows(now, tried({ way: 'clipAndFilter', targetPaprDb: 4, iterations: 3 }).figures, content);
    expect(rows.map(({ name }) => name)).toEqual([
      'EVM, all data',
      'gain fitted',
      'Mean power',
      '1 in 100 above',
      '1 in 1000 above',
      '99 % band',
      'Worst symbol',
    ]);
    expect(costRows(now, tried({ way: 'phases' }).figures, content)[0]).toEqual({ name: 'EVM', value: '0', unit: '%' });
  });

  it('begin with the document’s own reduction, else under the limit', () => {
    expect(firstBlanks(content, cells, 9.5)).toMatchObject({ clipTargetDb: 8.4, clipPasses: 4, streamId: 's0' });
    const stands = { ...content, peakReduction: { kind: 'clipAndFilter', targetPaprDb: 7.25, iterations: 9 } as const };
    const blanks = firstBlanks(stands, cells, 9.5);
    expect(askOf('clipAndFilter', blanks)).toEqual({ way: 'clipAndFilter', targetPaprDb: 7.25, iterations: 9 });
    expect(askOf('seed', blanks)).toEqual({ way: 'seed', streamId: 's0', first: 1, count: 100 });
    expect(axisOf([9.05, 11.33, 9.5])).toEqual({ from: 8.5, to: 12 });
  });
});

describe('a way’s row', () => {
  const row = (changes: Partial<Parameters<typeof PeakWay>[0]> = {}) => {
    const acts = { onChoose: jest.fn(), onStep: jest.fn(), onCancel: jest.fn() };
    const result = tried({ way: 'clipAndFilter', targetPaprDb: 5, iterations: 4 });
    render(
      <PeakWay
        way="clipAndFilter"
        state={{ result, progress: null, isRunning: false, isCancelled: false, failed: null }}
        settings={content}
        nowDb={9}
        limitDb={20}
        axis={{ from: 4, to: 10 }}
        isChosen
        isTabbable
        missing={null}
        register={() => undefined}
        {...acts}
        {...changes}
      />,
    );
    return acts;
  };

  it('is a radio that reads its figure, verdict and cost, and is moved by arrows', () => {
    const acts = row();
    const radio = screen.getByRole('radio', {
      name: /^Clip and filter\. \d\.\d\d dB, meets 20\. Changes the data cells/,
    });
    expect(radio).toHaveAttribute('aria-checked', 'true');
    fireEvent.click(radio);
    fireEvent.keyDown(radio, { key: 'ArrowDown' });
    expect(acts.onChoose).toHaveBeenCalledTimes(1);
    expect(acts.onStep).toHaveBeenCalledWith(1);
  });

  it('tells how far it is, beside Cancel', () => {
    const progress = { done: 120, total: 200, bestPaprDb: 9.7, unit: 'tries' } as const;
    const acts = row({ state: { result: null, progress, isRunning: true, isCancelled: false, failed: null } });
    expect(screen.getByText('120 of 200 tried, the best 9.70 dB')).toBeInTheDocument();
    expect(screen.getByRole('progressbar')).toHaveAttribute('aria-valuenow', '60');
    fireEvent.click(screen.getByRole('button', { name: 'Cancel Clip and filter' }));
    expect(acts.onCancel).toHaveBeenCalled();
  });

  it('says what is missing in the figure’s place', () => {
    row({ missing: 'No data cells.' });
    const radio = screen.getByRole('radio', { name: 'Clip and filter. No data cells.' });
    expect(within(radio).queryByText(/meets|over by/)).toBeNull();
  });
});
