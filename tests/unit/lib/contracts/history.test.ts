import { groupHistory } from '@/lib/contracts/history';
import type { Revision } from '@/lib/contracts/waveforms';

const MINUTE_MS = 60_000;

function revision(number: number, person: string, minute: number, change: Partial<Revision> = {}): Revision {
  const savedBy = { personId: person, name: person };
  const savedAtMs = minute * MINUTE_MS;
  return {
    waveformId: 'w',
    revisionId: `r${number}`,
    number,
    parentId: null,
    savedBy,
    savedAtMs,
    title: 'T',
    contentDigest: '',
    intentDigest: '',
    documentDigest: '',
    isHead: false,
    isSide: false,
    stamp: { state: 'draft', editionNumber: null, reason: null, cameBack: null, atMs: savedAtMs, by: savedBy },
    ...change,
  };
}

const grouped = (...oldestFirst: Revision[]) =>
  groupHistory([...oldestFirst].reverse()).map((line) => line.revisions.map((r) => r.number));

test('one person, less than 10 minutes between neighbours: one line, however long it grows', () => {
  expect(grouped(revision(1, 'a', 0), revision(2, 'a', 9), revision(3, 'a', 18))).toEqual([[3, 2, 1]]);
});

test('10 minutes or another person begin a new line', () => {
  expect(grouped(revision(1, 'a', 0), revision(2, 'a', 10))).toEqual([[2], [1]]);
  expect(grouped(revision(1, 'a', 0), revision(2, 'b', 1), revision(3, 'a', 2))).toEqual([[3], [2], [1]]);
});

test('what was asked for, released, returned or kept aside stands alone', () => {
  const released = revision(2, 'a', 1);
  released.stamp.state = 'released';
  expect(grouped(revision(1, 'a', 0), released, revision(3, 'a', 2))).toEqual([[3], [2], [1]]);
  const returned = revision(2, 'a', 1);
  returned.stamp.cameBack = 'returned';
  expect(grouped(revision(1, 'a', 0), returned, revision(3, 'a', 2))).toEqual([[3], [2], [1]]);
  expect(grouped(revision(1, 'a', 0), revision(2, 'a', 1, { isSide: true }), revision(3, 'a', 2))).toHaveLength(3);
});

test('a clock that jumped back by hours joins nothing', () => {
  expect(grouped(revision(1, 'a', 300), revision(2, 'a', 0))).toEqual([[2], [1]]);
});

test('the newest of a line leads it', () => {
  expect(groupHistory([revision(2, 'a', 1), revision(1, 'a', 0)])[0]!.newest.number).toBe(2);
});
