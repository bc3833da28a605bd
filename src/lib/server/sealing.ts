/**
 * Encrypts what must be read again later and would be of use to a thief of the database: AES-256-GCM (NIST SP 800-38D)
 * under a key that HKDF (RFC 5869) derives from AUTH_SECRET, one for each purpose. Whom a text belongs to is
 * authenticated with it, so that no row's text works in another row.
 */
import { createCipheriv, createDecipheriv, hkdfSync, randomBytes } from 'node:crypto';
import { environment } from './environment';

const CIPHER = 'aes-256-gcm';
const KEY_BYTES = 32;
const NONCE_BYTES = 12;
const TAG_BYTES = 16;

function keyOf(purpose: string): Buffer {
  return Buffer.from(
    hkdfSync('sha256', environment.AUTH_SECRET, '', `windlass ${purpose}`, KEY_BYTES),
  );
}

/** Encrypts a text for a purpose and an owner; the answer is base64url of nonce, tag and cipher text. */
export function seal(text: string, purpose: string, owner: string): string {
  const nonce = randomBytes(NONCE_BYTES);
  const cipher = createCipheriv(CIPHER, keyOf(purpose), nonce).setAAD(Buffer.from(owner));
  const sealed = Buffer.concat([cipher.update(text, 'utf8'), cipher.final()]);
  return Buffer.concat([nonce, cipher.getAuthTag(), sealed]).toString('base64url');
}

/** Reads what `seal` wrote; throws when it was changed, belongs to another owner, or AUTH_SECRET is another one. */
export function unseal(sealed: string, purpose: string, owner: string): string {
  const bytes = Buffer.from(sealed, 'base64url');
  const nonce = bytes.subarray(0, NONCE_BYTES);
  const tag = bytes.subarray(NONCE_BYTES, NONCE_BYTES + TAG_BYTES);
  const decipher = createDecipheriv(CIPHER, keyOf(purpose), nonce, { authTagLength: TAG_BYTES })
    .setAAD(Buffer.from(owner))
    .setAuthTag(tag);
  const text = decipher.update(bytes.subarray(NONCE_BYTES + TAG_BYTES));
  return Buffer.concat([text, decipher.final()]).toString('utf8');
}
