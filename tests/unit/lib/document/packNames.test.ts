import { baseName, slugOf } from '@/lib/document/packNames';

const vectorSha256 = '0123456789abcdef'.repeat(4);

test.each([
  ['20 MHz, 52 subcarriers', '20-mhz-52-subcarriers'],
  ['  [Test] — №2  ', 'test-no2'],
  ['ﬁlter Ⅳ', 'filter-iv'],
  ['Größe', 'gro-e'],
  ['信号', 'waveform'],
  ['---', 'waveform'],
  ['../../etc/passwd', 'etc-passwd'],
])('the slug of %p is %p', (title, slug) => {
  expect(slugOf(title, 64)).toBe(slug);
});

test('base names tell editions, drafts and vectors apart', () => {
  expect(baseName({ title: 'Two tones', edition: 3, vectorSha256, most: 64 })).toBe('two-tones-e3-01234567');
  expect(baseName({ title: 'Two tones', edition: null, vectorSha256, most: 64 })).toBe('two-tones-draft-01234567');
});

test('a long title is cut to fit, never the part that tells apart', () => {
  for (let most = 20; most <= 64; most += 1) {
    for (const edition of [null, 1, 12, 12345, 999_999_999]) {
      const name = baseName({
        title: 'a b c d e f g h i j k l m n o p q r s t u v w x y z 0 1 2 3',
        edition,
        vectorSha256,
        most,
      });
      expect(name.length).toBeLessThanOrEqual(most);
      expect(name).toMatch(/^[a-z0-9]+(-[a-z0-9]+)*$/);
      expect(name.endsWith(`${edition === null ? 'draft' : `e${edition}`}-01234567`)).toBe(true);
    }
  }
  expect(baseName({ title: '', edition: null, vectorSha256, most: 20 })).toBe('wavef-draft-01234567');
});
