import { benchWarnings } from '@/lib/contracts/benchWarnings';
import type { BenchContent } from '@/lib/synth/index';
import { openBench } from '../../../helpers/documents';

const warningsOf = (overrides: Partial<BenchContent>) => benchWarnings(openBench(overrides).content);

test('a profile without contradictions has no warnings', () => {
  expect(warningsOf({})).toEqual([]);
});

test('lengths beside the granularity name the nearest one that loads', () => {
  expect(warningsOf({ granularitySamples: 10, leastSamples: 25, mostSamples: 99 })).toMatchObject([
    { pointer: '/content/leastSamples', use: 30 },
    { pointer: '/content/mostSamples', use: 90 },
  ]);
});

test('no multiple between shortest and longest: nothing loads', () => {
  expect(warningsOf({ granularitySamples: 1000, leastSamples: 1001, mostSamples: 1999 })).toMatchObject([
    { pointer: '/content/granularitySamples', use: null },
  ]);
});

test('a clock step without a multiple in its range', () => {
  expect(warningsOf({ sampleClockHz: { least: 101, most: 199, step: 100 } })).toMatchObject([
    { pointer: '/content/sampleClockHz/step' },
  ]);
  expect(warningsOf({ sampleClockHz: { least: 101, most: 200, step: 100 } })).toEqual([]);
});

test('markers: shorter than a step, and more than the low bits hold', () => {
  const bytes = { count: 2, packing: 'bytes', leastSamples: 10, stepSamples: 8 } as const;
  expect(warningsOf({ markers: bytes })).toMatchObject([{ pointer: '/content/markers/leastSamples', use: 16 }]);
  const low = { count: 8, packing: 'lowBits', leastSamples: 1, stepSamples: 1 } as const;
  expect(warningsOf({ word: 'int16', bits: 14, align: 'left', markers: low })).toMatchObject([
    { pointer: '/content/markers/count', use: 4 },
  ]);
});
