import { hash, verify } from '@node-rs/argon2';

// argon2id is the package's default algorithm. 19 MiB, 2 passes, 1 lane: OWASP Password Storage Cheat Sheet (from memory).
const COST = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

export function hashPassword(password: string): Promise<string> {
  return hash(password.normalize('NFKC'), COST);
}

// Made once: a person who does not exist costs the same time as one who does.
let nobody: Promise<string> | undefined;

/** False for a wrong password, an unknown person and one without a password, in the same time. */
export async function isPassword(passwordHash: string | null, password: string): Promise<boolean> {
  nobody ??= hashPassword('nobody has this password');
  const isRight = await verify(passwordHash ?? (await nobody), password.normalize('NFKC'));
  return isRight && passwordHash !== null;
}
