import { createHash, randomBytes, timingSafeEqual } from 'node:crypto';

/** Hex SHA-256 of a secret with enough entropy of its own to need no salt. */
export function hashSecret(secret: string): string {
  return createHash('sha256').update(secret, 'utf8').digest('hex');
}

/** 256 random bits in base64url. */
export function newLinkToken(): string {
  return randomBytes(32).toString('base64url');
}

const CODE_LETTERS = 'ABCDEFGHJKMNPQRSTVWXYZ0123456789'; // 32: I, L, O and U are left out

/** 100 random bits as five groups of four letters, to be typed by hand. */
export function newFirstRunCode(): string {
  const letters = Array.from(randomBytes(20), (byte) => CODE_LETTERS[byte % CODE_LETTERS.length]).join('');
  return letters.replace(/(.{4})(?=.)/g, '$1-');
}

/** Case, spaces and dashes do not matter when a code is typed, nor O for 0, I or L for 1. */
export function hashFirstRunCode(code: string): string {
  return hashSecret(code.toUpperCase().replaceAll(/[\s-]/g, '').replaceAll('O', '0').replaceAll(/[IL]/g, '1'));
}

export function isSameHash(a: string, b: string): boolean {
  const [left, right] = [Buffer.from(a, 'utf8'), Buffer.from(b, 'utf8')];
  return left.length === right.length && timingSafeEqual(left, right);
}
