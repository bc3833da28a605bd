/** Hashing of passwords with argon2id. */
import { hash, verify } from '@node-rs/argon2';

// OWASP's Password Storage Cheat Sheet: argon2id with 19 MiB, two passes, one lane.
const parameters = { algorithm: 2, memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

/** A hash that no password belongs to, so that an unknown address takes as long as a known one. */
let nobody: Promise<string> | null = null;

export function hashPassword(password: string): Promise<string> {
  return hash(password, parameters);
}

/** True when the password belongs to the hash; without a hash it takes the same time and is always false. */
export async function verifyPassword(
  passwordHash: string | null,
  password: string,
): Promise<boolean> {
  if (passwordHash !== null) return verify(passwordHash, password);
  nobody ??= hashPassword('nobody has this password');
  await verify(await nobody, password);
  return false;
}
