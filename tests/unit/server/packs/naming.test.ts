import { baseNameOf } from '@/server/packs/naming';

const digest = '6ecf12ab34cd56ef'.repeat(4);

test.each([
  ['PA ladder 20 MHz', 3, 31, 'pa-ladder-20-mhz-e3-6ecf12ab'],
  ['PA ladder 20 MHz', 'draft', 31, 'pa-ladder-20-mhz-draft-6ecf12ab'],
  ['PA ladder 20 MHz', 'draft', 24, 'pa-ladder-draft-6ecf12ab'],
  ['PA ladder 20 MHz', 'draft', 25, 'pa-ladder-draft-6ecf12ab'], // no hyphen before the hyphen
  ['ﬁne ½ \u00bd — x', 1, 64, 'fine-1-2-1-2-x-e1-6ecf12ab'], // compatibility forms are spelled out
  ['試験', 12, 31, 'waveform-e12-6ecf12ab'],
  ['../../etc/passwd', 1, 31, 'etc-passwd-e1-6ecf12ab'],
  ['long title that goes on', 1_000_000, 20, 'lo-e1000000-6ecf12ab'],
] as const)('%s, %s, %i characters', (title, state, most, expected) => {
  const name = baseNameOf(title, state, digest, most);
  expect(name).toBe(expected);
  expect(name.length).toBeLessThanOrEqual(most);
});
