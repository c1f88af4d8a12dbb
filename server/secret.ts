import { randomBytes } from 'node:crypto';
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';

const FILE = 'secret';
const SHORTEST = 32;

/**
 * Gives the key material of this installation: what the environment says, else the file `secret` of the data directory, made at the first
 * start (256 random bits, readable by its owner only). Throws when the file holds less than 32 characters: signing with it would be weak.
 */
export function loadSecret(dataDirectory: string, given: string | undefined): string {
  if (given !== undefined) return given;
  const file = join(dataDirectory, FILE);
  mkdirSync(dataDirectory, { recursive: true, mode: 0o700 });
  try {
    // 'wx' never replaces a secret: replacing it would end every session.
    writeFileSync(file, `${randomBytes(32).toString('base64url')}\n`, { mode: 0o600, flag: 'wx' });
  } catch (error) {
    if (!(error instanceof Error && 'code' in error && error.code === 'EEXIST')) throw error;
  }
  const secret = readFileSync(file, 'utf8').trim();
  if (secret.length < SHORTEST)
    throw new Error(`${file} holds ${secret.length} characters, but a secret needs ${SHORTEST}.`);
  return secret;
}
