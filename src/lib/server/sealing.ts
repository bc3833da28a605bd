/** Secrets that the product has to read again: sealed in the database, opened with a key from AUTH_SECRET. */
import { createCipheriv, createDecipheriv, hkdfSync, randomBytes } from 'node:crypto';
import { environment } from './environment';

const ALGORITHM = 'aes-256-gcm';
const NONCE_BYTES = 12;
const TAG_BYTES = 16;

/** One key for each use, so that what is sealed for one cannot be opened as another. */
function keyFor(use: string): Buffer {
  return Buffer.from(hkdfSync('sha256', environment.AUTH_SECRET, '', `windlass ${use}`, 32));
}

/** The text sealed for a use, as base64url of nonce, ciphertext and tag. */
export function seal(use: string, text: string): string {
  const nonce = randomBytes(NONCE_BYTES);
  const cipher = createCipheriv(ALGORITHM, keyFor(use), nonce);
  const sealed = Buffer.concat([cipher.update(text, 'utf8'), cipher.final()]);
  return Buffer.concat([nonce, sealed, cipher.getAuthTag()]).toString('base64url');
}

/** Opens what was sealed for a use; null where AUTH_SECRET is not the one it was sealed with, or it was changed. */
export function unseal(use: string, sealed: string): string | null {
  const bytes = Buffer.from(sealed, 'base64url');
  if (bytes.length < NONCE_BYTES + TAG_BYTES) return null;
  const tag = bytes.subarray(-TAG_BYTES);
  const decipher = createDecipheriv(ALGORITHM, keyFor(use), bytes.subarray(0, NONCE_BYTES), {
    authTagLength: TAG_BYTES,
  });
  decipher.setAuthTag(tag);
  try {
    const text = decipher.update(bytes.subarray(NONCE_BYTES, -TAG_BYTES));
    return Buffer.concat([text, decipher.final()]).toString('utf8');
  } catch {
    return null;
  }
}
