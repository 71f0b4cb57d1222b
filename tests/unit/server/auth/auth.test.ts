import { authorizeAct, authorizeRead } from '@/server/auth/authorized';
import type { Actor } from '@/server/auth/actor';
import { hashPassword, isPassword } from '@/server/auth/passwords';
import { rightsOf } from '@/server/auth/permissions';
import { hashFirstRunCode, newFirstRunCode, newLinkToken } from '@/server/auth/secrets';
import { addressKey, createTryLimit } from '@/server/auth/tryLimit';
import { rightSchema, roleSchema, type Right, type Role } from '@/lib/contracts/common';

const rights = (...roles: Role[]) => rightSchema.options.filter((right) => rightsOf(roles).has(right));

describe('rights', () => {
  // The paragraph of the product's description on rights, as a table.
  const table: [Right, Role[]][] = [
    ['readWaveforms', ['author', 'reviewer']],
    ['saveWaveforms', ['author']],
    ['reviewWaveforms', ['reviewer']],
    ['withdrawEditions', ['reviewer', 'admin']],
    ['readEditions', ['author', 'reviewer', 'operator', 'admin']],
    ['makeEditionPacks', ['author', 'reviewer', 'operator', 'admin']],
    ['makeDraftPacks', ['author']],
    ['enterDeviceCards', ['author', 'reviewer', 'operator', 'admin']],
    ['readBenches', ['author', 'reviewer', 'operator', 'admin']],
    ['writeBenches', ['admin']],
    ['managePeople', ['admin']],
    ['readAudit', ['admin']],
  ];

  it.each(table)('%s: %j', (right, roles) => {
    expect(roleSchema.options.filter((role) => rightsOf([role]).has(right))).toEqual(roles);
  });

  it('are all in the table', () => {
    expect(table.map(([right]) => right).sort()).toEqual([...rightSchema.options].sort());
  });

  it('are the union of the roles; none for nobody', () => {
    expect(rights('author', 'admin')).toEqual(
      rightSchema.options.filter((right) => rights('author').includes(right) || rights('admin').includes(right)),
    );
    expect(rights()).toEqual([]);
  });
});

describe('authorizing', () => {
  const actor = (...roles: Role[]): Actor => ({
    personId: 'p',
    name: 'P',
    roles,
    rights: rightsOf(roles),
    sessionId: null,
  });
  const own = { ownerId: 'p' };
  const code = (work: () => unknown) => {
    try {
      work();
      return 'let through';
    } catch (error) {
      return (error as { code: string }).code;
    }
  };

  it('does not tell a missing thing from one that may not be seen', () => {
    expect(code(() => authorizeRead(actor('author'), 'readWaveforms', own))).toBe('let through');
    expect(code(() => authorizeRead(actor('author'), 'readWaveforms', undefined))).toBe('not_found');
    expect(code(() => authorizeRead(actor('operator'), 'readWaveforms', own))).toBe('not_found');
    expect(code(() => authorizeRead(actor('author'), 'readWaveforms', own, () => false))).toBe('not_found');
  });

  it('forbids an act by right and by the thing itself', () => {
    expect(code(() => authorizeAct(actor('author'), 'makeDraftPacks', own, (it) => it.ownerId === 'p'))).toBe(
      'let through',
    );
    expect(code(() => authorizeAct(actor('author'), 'makeDraftPacks', own, (it) => it.ownerId === 'q'))).toBe(
      'action_forbidden',
    );
    expect(code(() => authorizeAct(actor('operator'), 'makeDraftPacks', own))).toBe('action_forbidden');
  });
});

describe('a limit of tries', () => {
  let nowMs = 0;
  const clock = { nowMs: () => nowMs };
  beforeEach(() => (nowMs = 1_000_000));

  it('slides: each try ends by itself', () => {
    const limit = createTryLimit(clock, 2, 1000);
    limit.take('a');
    nowMs += 600;
    limit.take('a');
    expect(() => limit.take('a')).toThrow(
      expect.objectContaining({ code: 'too_many', details: expect.objectContaining({ retryAfterSec: 1 }) }),
    );
    limit.take('b');
    nowMs += 401;
    limit.take('a');
    expect(() => limit.take('a')).toThrow();
  });

  it('gives back what succeeded', () => {
    const limit = createTryLimit(clock, 1, 1000);
    for (let i = 0; i < 5; i += 1) limit.take('a')();
    limit.take('a');
    expect(() => limit.take('a')).toThrow();
  });

  it('waits no longer than a window when the clock jumps back', () => {
    const limit = createTryLimit(clock, 1, 1000);
    limit.take('a');
    nowMs -= 500_000;
    expect(() => limit.take('a')).toThrow(
      expect.objectContaining({ details: expect.objectContaining({ retryAfterSec: 1 }) }),
    );
  });

  it('keeps a bounded number of keys', () => {
    const limit = createTryLimit(clock, 1, 1000);
    limit.take('first');
    for (let i = 0; i < 10_000; i += 1) limit.take(`address ${i}`);
    limit.take('first'); // let go, so free again: a bound costs a try, never the memory
  });
});

it.each([
  ['192.0.2.7', '192.0.2.7'],
  ['::ffff:192.0.2.7', '192.0.2.7'],
  ['2001:db8:0:1:aaaa:bbbb:cccc:dddd', '2001:db8:0:1::/64'],
  ['2001:DB8::1', '2001:db8:0:0::/64'],
  ['::1', '0:0:0:0::/64'],
  [undefined, 'unknown'],
])('tries from %s count for %s', (address, key) => {
  expect(addressKey(address)).toBe(key);
});

describe('secrets', () => {
  it('are long and never the same', () => {
    expect(new Set(Array.from({ length: 100 }, newLinkToken)).size).toBe(100);
    expect(Buffer.from(newLinkToken(), 'base64url')).toHaveLength(32);
    // 32 letters, 20 of them: 100 bits. Every letter must occur, else there are fewer.
    const letters = new Set(Array.from({ length: 200 }, newFirstRunCode).join('').replaceAll('-', ''));
    expect(letters.size).toBe(32);
  });

  it('a code is the same however it is typed', () => {
    const wanted = hashFirstRunCode('0A1B-CDEF-GHJK-MNPQ-RSTV');
    expect(hashFirstRunCode('oaib cdef ghjk mnpq rstv')).toBe(wanted);
    expect(hashFirstRunCode('0A1B-CDEF-GHJK-MNPQ-RSTW')).not.toBe(wanted);
  });

  it('a password is argon2id, and no account has none', async () => {
    const hash = await hashPassword('a long enough password');
    expect(hash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
    expect(await isPassword(hash, 'a long enough password')).toBe(true);
    expect(await isPassword(hash, 'another')).toBe(false);
    expect(await isPassword(null, 'nobody has this password')).toBe(false);
  });
});
