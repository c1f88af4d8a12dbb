import { createCipheriv, createDecipheriv, hkdfSync, randomBytes } from 'node:crypto';

const ALGORITHM = 'aes-256-gcm';
/** Length of the nonce and of the tag in bytes. Source: NIST SP 800-38D, sections 5.2.1.1 and 5.2.1.2. */
const NONCE_BYTES = 12;
const TAG_BYTES = 16;

/** Derives a key for one purpose from the installation's secret. Source: RFC 5869. */
function keyFor(secret: string): Buffer {
  return Buffer.from(hkdfSync('sha256', secret, '', 'quadrille stored answers', 32));
}

/** Encrypts a value for the database, so that a copy of it tells nobody a link. Gives base64url. */
export function seal(value: unknown, secret: string): string {
  const nonce = randomBytes(NONCE_BYTES);
  const cipher = createCipheriv(ALGORITHM, keyFor(secret), nonce, { authTagLength: TAG_BYTES });
  const text = Buffer.concat([cipher.update(JSON.stringify(value), 'utf8'), cipher.final()]);
  return Buffer.concat([nonce, cipher.getAuthTag(), text]).toString('base64url');
}

/** Opens what `seal` gave. Throws when it was made with another secret or changed since. */
export function unseal(sealed: string, secret: string): unknown {
  const bytes = Buffer.from(sealed, 'base64url');
  const cipher = createDecipheriv(ALGORITHM, keyFor(secret), bytes.subarray(0, NONCE_BYTES), {
    authTagLength: TAG_BYTES,
  });
  cipher.setAuthTag(bytes.subarray(NONCE_BYTES, NONCE_BYTES + TAG_BYTES));
  const text = Buffer.concat([cipher.update(bytes.subarray(NONCE_BYTES + TAG_BYTES)), cipher.final()]);
  return JSON.parse(text.toString('utf8'));
}
