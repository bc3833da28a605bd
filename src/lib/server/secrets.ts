/** Secrets that are handed out once, in a letter or on a page; only their hashes are stored. */
import { createHash, randomBytes } from 'node:crypto';

const SECRET_BYTES = 32;

/** A new secret of 256 random bits, safe in an address. */
export function makeSecret(): string {
  return randomBytes(SECRET_BYTES).toString('base64url');
}

/** What is stored of a secret. Random secrets need no slow hash. */
export function hashSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('hex');
}
