import canonicalize from 'canonicalize';
import fc from 'fast-check';
import { createHash } from 'node:crypto';
import {
  canonicalJson,
  contentDigest,
  digestOf,
  documentDigest,
  intentDigest,
  packKey,
  profileDigest,
  profileFileDigest,
} from '@/lib/document/digest';
import { openBench, smallDocument } from '@/tests/helpers/documents';

describe('canonical JSON', () => {
  test('RFC 8785, 3.2.2: the sample of literals, numbers and text', () => {
    const sample = JSON.parse(
      String.raw`{"numbers":[333333333.33333329,1E30,4.50,2e-3,0.000000000000000000000000001],"string":"\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\"\/","literals":[null,true,false]}`,
    ) as unknown;
    expect(canonicalJson(sample)).toBe(
      String.raw`{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\u000f\nA'B\"\\\\\"/"}`,
    );
  });

  test('RFC 8785, 3.2.3: keys sorted by UTF-16 code units', () => {
    const sample = {
      '\u20ac': 'Euro Sign',
      '\r': 'Carriage Return',
      '\ufb33': 'Hebrew Letter Dalet With Dagesh',
      '1': 'One',
      '\ud83d\ude00': 'Emoji: Grinning Face',
      '\u0080': 'Control',
      '\u00f6': 'Latin Small Letter O With Diaeresis',
    };
    const values = [...canonicalJson(sample).matchAll(/:"([^"]+)"/g)].map((match) => match[1]);
    expect(values).toEqual([
      'Carriage Return',
      'One',
      'Control',
      'Latin Small Letter O With Diaeresis',
      'Euro Sign',
      'Emoji: Grinning Face',
      'Hebrew Letter Dalet With Dagesh',
    ]);
  });

  // RFC 8785, Appendix B: IEEE 754 bits and their text (recalled).
  test.each([
    ['0000000000000000', '0'],
    ['8000000000000000', '0'],
    ['0000000000000001', '5e-324'],
    ['8000000000000001', '-5e-324'],
    ['7fefffffffffffff', '1.7976931348623157e+308'],
    ['4340000000000000', '9007199254740992'],
    ['4430000000000000', '295147905179352830000'],
    ['44b52d02c7e14af5', '9.999999999999997e+22'],
    ['44b52d02c7e14af6', '1e+23'],
    ['44b52d02c7e14af7', '1.0000000000000001e+23'],
    ['444b1ae4d6e2ef4e', '999999999999999700000'],
    ['444b1ae4d6e2ef4f', '999999999999999900000'],
    ['444b1ae4d6e2ef50', '1e+21'],
    ['3eb0c6f7a0b5ed8c', '9.999999999999997e-7'],
    ['3eb0c6f7a0b5ed8d', '0.000001'],
    ['41b3de4355555553', '333333333.3333332'],
    ['41b3de4355555557', '333333333.33333343'],
    ['becbf647612f3696', '-0.0000033333333333333333'],
  ])('RFC 8785, appendix B: %s', (bits, text) => {
    const value = new DataView(Uint8Array.from(Buffer.from(bits, 'hex')).buffer).getFloat64(0);
    expect(canonicalJson(value)).toBe(text);
    expect(canonicalJson([value])).toBe(`[${text}]`);
  });

  test.each([[NaN], [Infinity], [[1, NaN]], [{ a: -Infinity }], [['\ud800']], [undefined], [{ '\udc00': 1 }]])(
    'refuses %p',
    (value) => {
      expect(() => canonicalJson(value)).toThrow();
    },
  );

  test('equals the package on any JSON value', () => {
    fc.assert(fc.property(fc.jsonValue(), (value) => canonicalJson(value) === canonicalize(value)));
  });
});

describe('digests', () => {
  const reverseKeys = (value: unknown): unknown => {
    if (Array.isArray(value)) return value.map(reverseKeys);
    if (typeof value !== 'object' || value === null) return value;
    return Object.fromEntries(
      Object.entries(value)
        .reverse()
        .map(([key, entry]) => [key, reverseKeys(entry)]),
    );
  };

  test('are SHA-256 of the canonical JSON', () => {
    const { content } = smallDocument();
    const expected = createHash('sha256').update(canonicalize(content)!).digest('hex');
    expect(contentDigest(content)).toBe(`sha256:${expected}`);
    // FIPS 180-4: the digest of the two bytes "{}", by openssl too
    expect(digestOf({})).toBe('sha256:44136fa355b3678a1146ad16f7e8649e94fb4fc21fe77e8310c060f61caaff8a');
  });

  test('do not feel the order of keys, and feel what they name', () => {
    const document = smallDocument();
    const turned = reverseKeys(document) as typeof document;
    expect(contentDigest(turned.content)).toBe(contentDigest(document.content));
    expect(documentDigest(turned)).toBe(documentDigest(document));
    const renamed = { ...document, about: { ...document.about, title: 'Another' } };
    expect(contentDigest(renamed.content)).toBe(contentDigest(document.content));
    expect(documentDigest(renamed)).not.toBe(documentDigest(document));
    expect(intentDigest({ ...document.intent, lossDb: 3 })).not.toBe(intentDigest(document.intent));
    const bench = openBench();
    const noted = { ...bench, about: { ...bench.about, notes: 'moved' } };
    expect(profileDigest(noted.content)).toBe(profileDigest(bench.content));
    expect(profileFileDigest(noted)).not.toBe(profileFileDigest(bench));
  });

  test('packKey is the digest of its five parts and of nothing else', () => {
    const parts = {
      documentDigest: 'd',
      profileFileDigest: 'p',
      state: 'draft',
      synthVersion: '1',
      packVersion: '2',
    } as const;
    const text = '{"documentDigest":"d","packVersion":"2","profileFileDigest":"p","state":"draft","synthVersion":"1"}';
    expect(packKey(parts)).toBe(`sha256:${createHash('sha256').update(text).digest('hex')}`);
    expect(packKey({ ...parts, state: 3 })).not.toBe(packKey(parts));
    expect(packKey({ ...parts, extra: 1 } as typeof parts)).toBe(packKey(parts));
  });
});
